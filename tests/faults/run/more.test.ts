import { describe, expect, it } from "vitest";
import { cannotSay, faultLf8, storesAtOnce } from "./drivers";
import { FAULT_KINDS, type Fault, type FaultKind } from "./fault-line";
import { exploreAll, sweep } from "./sweep";

/** Kinds that leave a device somewhere between: the others only repeat what the LF-8's sweeps say of the same code. */
const TELLING: readonly FaultKind[] = ["reply-unplug", "request-restart", "ignored", "tab"];
/** A shared machine is slow; nothing here measures time. */
const PATIENCE_MS = 600_000;

describe("other kinds of memory", () => {
  it.each([
    { name: "a device that cannot say what it stored", definition: cannotSay, recovery: "finish" },
    { name: "a device that cannot say what it stored", definition: cannotSay, recovery: "put-back" },
    { name: "a device that stores at once", definition: storesAtOnce, recovery: "put-back" },
  ] as const)("no invariant breaks on $name, whose owner would rather $recovery", { timeout: PATIENCE_MS }, async ({ definition, recovery }) => {
    for (const kind of TELLING) {
      const { broken, cases } = await sweep({ definition, intent: { wish: "keep", recovery }, powerOnSlot: 2, dirty: false }, kind);
      expect(broken).toEqual([]);
      expect(cases).toBeGreaterThan(15);
    }
  });

  it("holds where non-volatile memory differed at the start, by a change that was never committed", { timeout: PATIENCE_MS }, async () => {
    for (const kind of ["request-restart", "reply-restart", "timer"] as const) {
      const { broken } = await sweep({ definition: faultLf8, intent: { wish: "keep", recovery: "put-back" }, powerOnSlot: 2, dirty: true }, kind);
      expect(broken).toEqual([]);
    }
  });
});

/** Repeats: the same numbers in every run. Source: a linear congruential generator with the constants of Numerical Recipes (from memory). */
function* numbers(seed: number): Generator<number> {
  for (let state = seed; ; ) {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    yield state / 2 ** 32;
  }
}

/** So many points are passed by a run that something went wrong in. */
const POINTS = 75;
const PAIRS = 120;

function pairs(seed: number): (readonly Fault[])[] {
  const chance = numbers(seed);
  const below = (most: number) => Math.floor((chance.next().value as number) * most);
  const fault = (): Fault => ({ at: below(POINTS), kind: FAULT_KINDS[below(FAULT_KINDS.length)] ?? "tab" });
  return Array.from({ length: PAIRS }, () => [fault(), fault()]);
}

describe("two faults in one run", () => {
  it.each([
    { wish: "keep", recovery: "finish" },
    { wish: "keep", recovery: "put-back" },
  ] as const)("break no invariant where the owner wants to $wish and in doubt to $recovery", { timeout: PATIENCE_MS }, async (intent) => {
    const { broken, ends } = await exploreAll({ definition: faultLf8, intent, powerOnSlot: 2, dirty: false }, pairs(intent.recovery === "finish" ? 1 : 2));
    expect(broken).toEqual([]);
    // Not vacuous: pairs lead to every end.
    expect(Object.keys(ends).sort()).toEqual(["called-off", "kept", "put-back"]);
  });
});
