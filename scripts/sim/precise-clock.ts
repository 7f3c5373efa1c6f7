import type { Clock } from "@/lib/serial/clock";

/** Below this a timer of Node is too coarse (it rounds up to whole ms and fires late by as much). */
const NAP_BELOW_MS = 2;
/** Longest nap, during which nothing else runs: what arrives meanwhile waits so long. */
const NAP_MS = 0.25;
/** A nap shorter than this is not worth its system call. */
const SPIN_BELOW_MS = 0.05;

const neverWoken = new Int32Array(new SharedArrayBuffer(4));

/**
 * Real time to about a tenth of a ms: the last stretch before a moment is spent in short naps, with the event loop in between.
 *
 * A byte at 115 200 baud takes 87 µs, a timer of Node 1 ms at least: without this the simulated device would answer late at
 * each request.
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
        const leftMs = dueMs - nowMs();
        if (leftMs > SPIN_BELOW_MS && leftMs < NAP_BELOW_MS)
          Atomics.wait(neverWoken, 0, 0, Math.min(NAP_MS, leftMs - SPIN_BELOW_MS));
        if (dueMs <= nowMs()) fire();
        else wait();
      };
      // Never fires before it returns: the caller does not expect that of a clock.
      const wait = (): void => {
        const leftMs = dueMs - nowMs();
        if (leftMs < NAP_BELOW_MS) setImmediate(look);
        else setTimeout(look, leftMs - NAP_BELOW_MS + 1);
      };
      wait();
      return () => {
        isLive = false;
      };
    },
  };
}
