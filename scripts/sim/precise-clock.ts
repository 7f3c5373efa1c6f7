import type { Clock } from "@/lib/serial/clock";

/** Below this a timer of Node is too coarse (it rounds up to whole ms and fires late by as much). */
const SPIN_BELOW_MS = 2;

/**
 * Real time to some ten microseconds: the last stretch before a moment is spent going round the event loop.
 *
 * A byte at 115 200 baud takes 87 µs, a timer of Node 1 ms at least: without this the simulated device would answer late at
 * each request. It costs processor time only while something is due within 2 ms.
 */
export function createPreciseClock(): Clock {
  const nowMs = (): number => performance.now();
  return {
    nowMs,
    wallMs: () => Date.now(),
    after(ms, fire) {
      const dueMs = nowMs() + Math.max(0, ms);
      let isLive = true;
      const look = (): void => {
        if (!isLive) return;
        if (dueMs <= nowMs()) fire();
        else wait();
      };
      // Never fires before it returns: the caller does not expect that of a clock.
      const wait = (): void => {
        const leftMs = dueMs - nowMs();
        if (leftMs < SPIN_BELOW_MS) setImmediate(look);
        else setTimeout(look, leftMs - SPIN_BELOW_MS + 1);
      };
      wait();
      return () => {
        isLive = false;
      };
    },
  };
}
