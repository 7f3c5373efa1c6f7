import type { Clock } from "@/lib/serial/clock";

/** Holds a line until it was silent for a while: what comes meanwhile belongs to nobody. */
export interface Quarantine {
  readonly active: boolean;
  /** @param hopeless what to do where the line is not silent within `atMostMs`: give it up, or go on all the same */
  start(quietMs: number, atMostMs: number, hopeless: boolean): void;
  /** Bytes came: the silence begins anew, up to its bound. */
  disturb(): void;
  whenQuiet(): Promise<void>;
  /** Ends without a word to `onQuiet`. */
  cancel(): void;
}

export function createQuarantine(clock: Clock, onQuiet: () => void, onHopeless: () => void): Quarantine {
  let hold: { readonly quietMs: number; readonly untilMs: number; readonly hopeless: boolean } | null = null;
  let cancelTimer = () => {};
  let waiters: (() => void)[] = [];

  function cancel(): void {
    cancelTimer();
    hold = null;
    const woken = waiters;
    waiters = [];
    for (const wake of woken) wake();
  }

  function end(): void {
    cancel();
    onQuiet();
  }

  return {
    get active() {
      return hold !== null;
    },
    start(quietMs, atMostMs, hopeless) {
      cancelTimer();
      hold = { quietMs, untilMs: clock.nowMs() + atMostMs, hopeless };
      cancelTimer = clock.after(quietMs, end);
    },
    disturb() {
      if (!hold) return;
      cancelTimer();
      if (clock.nowMs() < hold.untilMs) cancelTimer = clock.after(hold.quietMs, end);
      else if (hold.hopeless) onHopeless();
      else end();
    },
    whenQuiet: () => (hold ? new Promise((resolve) => waiters.push(resolve)) : Promise.resolve()),
    cancel,
  };
}
