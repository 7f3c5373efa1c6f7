import { describe, expect, it } from "vitest";
import { faultLf8 } from "./drivers";
import { FAULT_KINDS } from "./fault-line";
import { sweep } from "./sweep";

/** S1 to S8 of the run's model, held on the real run over the real simulated device: single faults at every request. */
describe("an owner who keeps, and finishes in doubt", () => {
  it.each(FAULT_KINDS)("breaks no invariant and finds an end after %s at any request", async (kind) => {
    const intent = { wish: "keep", recovery: "finish" } as const;
    const { cases, broken, ends } = await sweep({ definition: faultLf8, intent, powerOnSlot: 2, dirty: false }, kind);
    expect(broken).toEqual([]);
    // A run without faults has more than 30 points; that many were struck at.
    expect(cases).toBeGreaterThan(30);
    expect(Object.keys(ends).every((end) => ["kept", "put-back", "called-off"].includes(end))).toBe(true);
  });
});
