import { describe, expect, it } from "vitest";
import { CALM, type Case } from "./case-id";
import { DEVICE_NAMES } from "./drivers";
import { FAULT_KINDS, type FaultKind } from "./fault-line";
import { explore } from "./explore";
import type { Intent } from "./owner";
import { sweepRequests, Tally } from "./sweep";

/** A busy machine is slow; nothing here measures time. */
const PATIENCE_MS = 3_600_000;

const KEEPS: Intent = { wish: "keep", recovery: "finish" };
const GOES_BACK: Intent = { wish: "keep", recovery: "put-back" };

const CASES = DEVICE_NAMES.flatMap((device) => [
  { device, scenario: "align", intent: KEEPS, stride: 149 },
  { device, scenario: "by-hand", intent: GOES_BACK, stride: 151 },
] as const);

/**
 * S1 to S8 of the run's model where new is what was last aligned: one act of the adversary at every so-many-th request of a trial
 * that goes on by live alignment, and of a run opened for it.
 */
describe.each(CASES)("one act of the adversary in live alignment ($scenario) on $device, whose owner in doubt wants to $intent.recovery", ({ device, scenario, intent, stride }) => {
  const over: Case = { ...CALM, device, scenario, intent };

  it("comes to what was aligned, where nothing goes wrong", { timeout: PATIENCE_MS }, async () => {
    expect(await explore(over)).toMatchObject({ struck: 0, end: "kept", broken: [] });
  });

  it.each(FAULT_KINDS)("breaks no invariant and finds an end: %s", { timeout: PATIENCE_MS }, async (kind: FaultKind) => {
    const tally = new Tally();
    const phase = FAULT_KINDS.indexOf(kind);
    await sweepRequests(tally, over, kind, { stride, phase });
    await sweepRequests(tally, { ...over, powerOnSlot: 1 }, kind, { stride: 3 * stride, phase: phase + 1 });
    expect(tally.broken).toEqual([]);
    expect(tally.cases).toBeGreaterThan(0);
    expect(["kept", "put-back", "called-off"]).toEqual(expect.arrayContaining([...tally.ends]));
  });
});
