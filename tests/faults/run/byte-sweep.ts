import { describe, expect, it } from "vitest";
import type { WireDirection } from "@/lib/serial/simulator/wire-fault";
import { BYTE_KINDS, type ByteKind } from "./byte-faults";
import { CALM, type Case, type Scenario } from "./case-id";
import type { DeviceName } from "./drivers";
import { directionsOf, livedCases, sweepBytes, Tally } from "./sweep";

/** A busy machine is slow; nothing here measures time. */
const PATIENCE_MS = 3_600_000;

/** Every so many bytes, by scenario: faults that strike once, and faults that last. */
export type Strides = Readonly<Record<Scenario, { readonly once: number; readonly lasting: number }>>;

const INTENTS = {
  backup: { wish: "keep", recovery: "finish" },
  run: { wish: "keep", recovery: "put-back" },
  "put-back": { wish: "put-back", recovery: "put-back" },
} as const satisfies Readonly<Record<Scenario, Case["intent"]>>;

/** Where this ends, whatever happened to a byte on the way. */
const ENDS: Readonly<Record<Scenario, readonly string[]>> = {
  backup: ["backed-up", "not-backed-up"],
  run: ["kept", "put-back", "called-off"],
  "put-back": ["put-back"],
};

/** A stall lasts as it is, and a device that speaks while it starts would start for ever. */
function canLast(kind: ByteKind, direction: WireDirection): boolean {
  return kind !== "stall" && !(kind === "restart" && direction === "device-to-host");
}

/** Declares the tests of one device: every kind of fault at its bytes, each way, once and lasting, over a backup, a run and a putting back. @param least cases in all */
export function describeByteSweep(device: DeviceName, strides: Strides, least: number): void {
  describe.each(["backup", "run", "put-back"] as const)(`a fault at byte n of a %s, ${device}`, (scenario) => {
    it.each(BYTE_KINDS)("breaks no invariant and finds an end: %s", { timeout: PATIENCE_MS }, async (kind) => {
      const tally = new Tally();
      const over = { ...CALM, device, scenario, intent: INTENTS[scenario] };
      const phase = 5 * BYTE_KINDS.indexOf(kind);
      const { once, lasting } = strides[scenario];
      for (const direction of directionsOf(kind)) {
        await sweepBytes(tally, over, kind, direction, false, { stride: once, phase });
        if (canLast(kind, direction)) await sweepBytes(tally, over, kind, direction, true, { stride: lasting, phase: phase + 2 });
      }
      expect(tally.broken).toEqual([]);
      // Not vacuous: it struck, and every run came to one of its ends.
      expect(tally.cases).toBeGreaterThan(1);
      expect(ENDS[scenario]).toEqual(expect.arrayContaining([...tally.ends]));
    });
  });

  it(`has lived through ${least} cases at least, ${device}`, () => {
    expect(livedCases()).toBeGreaterThanOrEqual(least);
  });
}
