import type { Clock } from "@/lib/serial/clock";

/**
 * Waits until a promise settles either way, `ms` at most.
 * @returns whether it settled in time; what it settled to does not matter here
 */
export function settledWithin(clock: Clock, ms: number, promise: Promise<unknown> | undefined): Promise<boolean> {
  if (!promise) return Promise.resolve(true);
  return new Promise((resolve) => {
    const cancel = clock.after(ms, () => resolve(false));
    const settled = () => {
      cancel();
      resolve(true);
    };
    promise.then(settled, settled);
  });
}

/** Waits `ms`, or until the signal aborts. */
export function wait(clock: Clock, ms: number, signal?: AbortSignal): Promise<void> {
  return new Promise((resolve) => {
    if (signal?.aborted) return resolve();
    const end = () => {
      cancel();
      signal?.removeEventListener("abort", end);
      resolve();
    };
    const cancel = clock.after(ms, end);
    signal?.addEventListener("abort", end);
  });
}
