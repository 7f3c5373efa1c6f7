import { describe, expect, it } from "vitest";
import { CALM, type Case } from "./case-id";
import type { DeviceName } from "./drivers";
import { FAULT_KINDS, type FaultKind } from "./fault-line";
import type { Intent } from "./owner";
import { livedCases, sweepRequests, Tally } from "./sweep";

/** A busy machine is slow; nothing here measures time. */
const PATIENCE_MS = 3_600_000;

/** Devices that can hold a change that was never stored. */
const VOLATILE: readonly DeviceName[] = ["lf8", "brackenrow"];

const INTENTS: readonly Intent[] = [
  { wish: "keep", recovery: "finish" },
  { wish: "keep", recovery: "put-back" },
  { wish: "put-back", recovery: "put-back" },
];

/**
 * S1 to S8 of the run's model, held on the real run over the real simulated device: one act of the adversary at every
 * request, each kind of it, for each of three owners, with a restart into the slot of the start and into another one,
 * with and without a change by hand that was never stored. That is the bound: two acts in one run are drawn by chance.
 * @param strides every so many requests, for each owner
 * @param least cases in all
 */
export function describeRequestSweep(device: DeviceName, strides: readonly [number, number, number], least: number, way: Case["way"] = 1): void {
  describe.each(INTENTS.map((intent, index) => ({ ...intent, stride: strides[index] ?? 1 })))(
    `one act of the adversary in a run of way ${way}, ${device}, whose owner wants to $wish and in doubt to $recovery`,
    ({ wish, recovery, stride }) => {
      it.each(FAULT_KINDS)("breaks no invariant and finds an end: %s", { timeout: PATIENCE_MS }, async (kind: FaultKind) => {
        const tally = new Tally();
        const intent = { wish, recovery };
        const phase = FAULT_KINDS.indexOf(kind);
        const over = { ...CALM, device, scenario: "run", intent, way } as const;
        await sweepRequests(tally, over, kind, { stride, phase });
        // The slot of the start is on after a restart too; and non-volatile memory is not what it seemed.
        await sweepRequests(tally, { ...over, powerOnSlot: 1 }, kind, { stride: 7 * stride, phase });
        if (VOLATILE.includes(device)) await sweepRequests(tally, { ...over, dirty: true }, kind, { stride: 9 * stride, phase });
        await sweepRequests(tally, { ...over, hidden: true }, kind, { stride: 11 * stride, phase });
        expect(tally.broken).toEqual([]);
        expect(tally.cases).toBeGreaterThan(1);
        expect(["kept", "put-back", "called-off"]).toEqual(expect.arrayContaining([...tally.ends]));
        if (wish === "put-back") expect([...tally.ends]).not.toContain("kept");
      });
    },
  );

  it(`has lived through ${least} cases at least, ${device}`, () => {
    expect(livedCases()).toBeGreaterThanOrEqual(least);
  });
}
