import type { Clock } from "@/lib/serial/clock";

/** A clock that stands still until it is told. So a run repeats, and waiting costs nothing. */
export interface VirtualClock extends Clock {
  /** Timers that were set and have neither fired nor been taken back. */
  pendingTimers(): number;
  /**
   * Lets code run and time pass until `promise` settles, and passes its outcome on.
   * Throws when nothing is left that could settle it, or when `limitMs` (one virtual day) would be passed.
   */
  run<T>(promise: PromiseLike<T>, options?: { readonly limitMs?: number }): Promise<T>;
  /** Lets `ms` pass, firing every timer on the way in order. */
  advance(ms: number): Promise<void>;
}

type Timer = { readonly dueMs: number; readonly fire: () => void };

const DAY_MS = 86_400_000;
/** Turns of the event loop that are granted to work outside the clock (a digest in another thread) before a deadlock is called. */
const IDLE_TURNS = 20_000;
/** Timers named in an error. */
const NAMED_TIMERS = 5;

/** Waits until the microtasks of this turn are done, web streams' ones included. */
type Settle = { turn(): Promise<void>; end(): void };

/** Channels that no run uses now. Making one costs more than a run's turns. */
const resting: MessageChannel[] = [];

/** One message to ourselves is one turn of the event loop, in Node and in browsers alike. */
function createSettle(): Settle {
  const channel = resting.pop() ?? new MessageChannel();
  let wake: (() => void) | null = null;
  channel.port1.onmessage = () => wake?.();
  return {
    turn: () =>
      new Promise((resolve) => {
        wake = resolve;
        channel.port2.postMessage(0);
      }),
    end() {
      // Without a listener a port keeps no process alive.
      channel.port1.onmessage = null;
      resting.push(channel);
    },
  };
}

/** Timers in the order in which they fire: by moment, then by when they were set. */
function insert(timers: Timer[], timer: Timer): void {
  let low = 0;
  let high = timers.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    const other = timers[middle];
    if (other && other.dueMs <= timer.dueMs) low = middle + 1;
    else high = middle;
  }
  timers.splice(low, 0, timer);
}

function describe(timers: readonly Timer[], nowMs: number): string {
  if (timers.length === 0) return "no timer is set";
  const named = timers.slice(0, NAMED_TIMERS).map((timer) => `+${(timer.dueMs - nowMs).toFixed(3)} ms`);
  return `${timers.length} timers are set, the next at ${named.join(", ")}`;
}

/**
 * Makes a virtual clock.
 * @param options.startMs what `nowMs` says at first; `wallStartMs` what `wallMs` says then (1 January 2026, 00:00 UTC)
 */
export function createVirtualClock(
  options: { readonly startMs?: number; readonly wallStartMs?: number } = {},
): VirtualClock {
  const startMs = options.startMs ?? 0;
  const wallStartMs = options.wallStartMs ?? Date.UTC(2026, 0, 1);
  const timers: Timer[] = [];
  let nowMs = startMs;
  let running = false;

  async function drive(isDone: () => boolean, untilMs: number, settle: Settle): Promise<"done" | "idle" | "limit"> {
    let idleTurns = 0;
    for (;;) {
      await settle.turn();
      if (isDone()) return "done";
      const next = timers[0];
      if (!next) {
        if ((idleTurns += 1) > IDLE_TURNS) return "idle";
        continue;
      }
      if (next.dueMs > untilMs) return "limit";
      idleTurns = 0;
      timers.shift();
      nowMs = Math.max(nowMs, next.dueMs);
      next.fire();
    }
  }

  async function alone<T>(work: (settle: Settle) => Promise<T>): Promise<T> {
    if (running) throw new Error("The virtual clock runs already: await the other run first.");
    running = true;
    const settle = createSettle();
    try {
      return await work(settle);
    } finally {
      running = false;
      settle.end();
    }
  }

  return {
    nowMs: () => nowMs,
    wallMs: () => wallStartMs + (nowMs - startMs),
    pendingTimers: () => timers.length,
    after(ms, fire) {
      const timer: Timer = { dueMs: nowMs + Math.max(0, ms), fire };
      insert(timers, timer);
      return () => {
        const index = timers.indexOf(timer);
        if (index >= 0) timers.splice(index, 1);
      };
    },
    run<T>(promise: PromiseLike<T>, runOptions: { readonly limitMs?: number } = {}) {
      return alone<T>(async (settle) => {
        const limitMs = runOptions.limitMs ?? DAY_MS;
        let settled = false;
        const watched = Promise.resolve(promise).finally(() => (settled = true));
        // The outcome is awaited below; until then a rejection must not count as unhandled.
        watched.catch(() => undefined);
        const end = await drive(() => settled, nowMs + limitMs, settle);
        if (end === "done") return watched;
        const what =
          end === "idle" ? "Nothing can settle the promise" : `The promise is open after ${limitMs} virtual ms`;
        throw new Error(`${what}: at ${nowMs.toFixed(3)} ms ${describe(timers, nowMs)}.`);
      });
    },
    advance: (ms) =>
      alone(async (settle) => {
        const untilMs = nowMs + ms;
        await settle.turn();
        while ((timers[0]?.dueMs ?? Infinity) <= untilMs)
          await drive(() => (timers[0]?.dueMs ?? Infinity) > untilMs, untilMs, settle);
        nowMs = untilMs;
        await settle.turn();
      }),
  };
}
