import type { Clock } from "@/lib/serial/clock";

/** A wait is cut into slices: a page that was held up in one shows it by a late timer. */
const SLICE_MS = 100;
/** A timer this late was held back: a hidden tab, a busy page. */
const LATE_MS = 50;
/** Bytes that wait to be read get their turn before a deadline is judged. */
const GRACE_MS = 20;

/**
 * A deadline that counts only the time in which the page could listen.
 *
 * Where a timer comes late, the page itself was held up, and the silence was not the device's: that time is added, at most as
 * much again as the wait. Under a clock that is never late it fires after exactly `ms`.
 * @returns what takes it back
 */
export function afterPatiently(clock: Clock, ms: number, fire: () => void): () => void {
  let leftMs = ms;
  let spareMs = ms;
  let cancel = () => {};
  const slice = (): void => {
    const sliceMs = Math.min(SLICE_MS, leftMs);
    const dueMs = clock.nowMs() + sliceMs;
    cancel = clock.after(sliceMs, () => {
      leftMs -= sliceMs;
      const lateMs = clock.nowMs() - dueMs;
      if (lateMs > LATE_MS && spareMs > 0) {
        const addedMs = Math.min(spareMs, lateMs, SLICE_MS);
        spareMs -= addedMs;
        leftMs += Math.max(addedMs, GRACE_MS);
      }
      if (leftMs > 0) slice();
      else fire();
    });
  };
  slice();
  return () => cancel();
}
