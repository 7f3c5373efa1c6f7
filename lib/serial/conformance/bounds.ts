import type { Clock } from "@/lib/serial/clock";

/**
 * What one run of the suite may take, whatever the definition says. The shipped drivers take a tenth of it.
 * Source: the project's own rule, measured with the shipped drivers and the hostile ones of the tests.
 */
export const CONFORMANCE_BOUNDS = {
  /** Requests over the simulated line. */
  exchanges: 60_000,
  /** Bytes over it, both ways. */
  bytes: 8_000_000,
  /** Time of the simulated world that one step may take, in ms: the longest timeout, retried, in each of several requests. */
  stepVirtualMs: 4 * 3_600_000,
  /** Real time by the clock that the caller gives, in ms. */
  wallMs: 120_000,
  /** Values of settings that are tried; past that, slots and modes are thinned out. */
  values: 6000,
  /** Slots that are made active each. */
  slots: 64,
  /** Places at which each kind of fault strikes, each way. */
  faultPlaces: 6,
  recordings: 20,
  /** Lines of one recording that are looked at. */
  recordingLines: 20_000,
} as const;

export type ConformanceBounds = { readonly [name in keyof typeof CONFORMANCE_BOUNDS]: number };

/** Thrown inside the suite when a bound is passed; the report then says so and is not green. */
export class BoundPassed extends Error {}

/** Counts what is used up. One for a run of the suite. */
export type Budget = {
  readonly exchanges: number;
  readonly bytes: number;
  /** Adds what a rig has used. Throws `BoundPassed`. */
  spend(exchanges: number, bytes: number): void;
  /** Throws `BoundPassed` when the real time is over or the caller called it off. */
  check(): void;
};

export function createBudget(bounds: ConformanceBounds, clock: Clock, signal: AbortSignal | undefined): Budget {
  const untilMs = clock.nowMs() + bounds.wallMs;
  let exchanges = 0;
  let bytes = 0;
  function check(): void {
    if (signal?.aborted) throw new BoundPassed("The suite was called off.");
    if (clock.nowMs() > untilMs) throw new BoundPassed(`The suite was ended after ${Math.round(bounds.wallMs / 1000)} s.`);
    if (exchanges > bounds.exchanges) throw new BoundPassed(`The suite was ended after ${bounds.exchanges} exchanges.`);
    if (bytes > bounds.bytes) throw new BoundPassed(`The suite was ended after ${bounds.bytes} bytes.`);
  }
  return {
    get exchanges() {
      return exchanges;
    },
    get bytes() {
      return bytes;
    },
    spend(moreExchanges, moreBytes) {
      exchanges += moreExchanges;
      bytes += moreBytes;
      check();
    },
    check,
  };
}
