import type { Clock } from "@/lib/serial/clock";

/** Longest delay that browsers and Node keep: a longer one fires at once (HTML, "timer initialisation steps"; Node timers). */
const MAX_DELAY_MS = 2_147_483_647;

/**
 * The machine's own time.
 *
 * A hidden tab fires timers late (aligned to 1 s), and both browsers and Node may fire one a fraction early. So `after` never
 * fires before its moment by `nowMs`, and whoever sets a deadline judges it by `nowMs` whenever a tick or a byte arrives.
 */
export function createRealClock(): Clock {
  const nowMs = (): number => performance.now();
  return {
    nowMs,
    wallMs: () => Date.now(),
    after(ms, fire) {
      const dueMs = nowMs() + Math.max(0, ms);
      let timer: ReturnType<typeof setTimeout> | undefined;
      const arm = (): void => {
        timer = setTimeout(
          () => {
            if (nowMs() < dueMs) arm();
            else fire();
          },
          Math.min(MAX_DELAY_MS, Math.max(0, dueMs - nowMs())),
        );
      };
      arm();
      return () => clearTimeout(timer);
    },
  };
}
