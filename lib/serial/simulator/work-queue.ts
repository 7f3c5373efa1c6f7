import type { Clock } from "@/lib/serial/clock";

/** Requests that a device may hold before it drops what comes in. */
export const MAX_WAITING = 64;

/** A device's single worker: one job after another, each taking its time. */
export type WorkQueue = {
  /** False: too many wait, the job is dropped. */
  add(takesMs: number, run: () => void): boolean;
  clear(): void;
  readonly waiting: number;
};

/**
 * Jobs fall due by computed times, not by chained timers: where a timer comes late (a browser clamps nested ones), all that is due runs at once.
 */
export function createWorkQueue(clock: Clock): WorkQueue {
  const jobs: { readonly dueMs: number; readonly run: () => void }[] = [];
  let lastDueMs = -Infinity;
  let cancel: (() => void) | null = null;

  function runDue(): void {
    cancel = null;
    for (let job = jobs[0]; job && job.dueMs <= clock.nowMs(); job = jobs[0]) {
      jobs.shift();
      job.run();
    }
    const next = jobs[0];
    if (next && cancel === null) cancel = clock.after(next.dueMs - clock.nowMs(), runDue);
  }

  return {
    add(takesMs, run) {
      if (jobs.length >= MAX_WAITING) return false;
      lastDueMs = Math.max(clock.nowMs(), lastDueMs) + takesMs;
      jobs.push({ dueMs: lastDueMs, run });
      cancel ??= clock.after(lastDueMs - clock.nowMs(), runDue);
      return true;
    },
    clear() {
      cancel?.();
      cancel = null;
      jobs.length = 0;
      lastDueMs = -Infinity;
    },
    get waiting() {
      return jobs.length;
    },
  };
}
