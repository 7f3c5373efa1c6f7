import type { Placement } from "@/lib/profile/document";
import { describe, expect, it } from "vitest";
import { documentOf, lf8, oneSlot, television, timingOf } from "@/tests/unit/profile/samples";
import { found, labels, theOne } from "./find";

const placed = (placement: Placement, name: Parameters<typeof timingOf>[0] = "240p60") =>
  oneSlot({ placement }, timingOf(name));

describe("placement", () => {
  it("says by how much a slot is too tall, and offers the tallest that fits at its offset on the device's steps", () => {
    const finding = theOne("placement.vertical", {
      document: placed({ heightPct: 108, offsetLines: -3 }),
      device: lf8,
      screen: television,
    });
    expect(finding).toMatchObject({
      severity: "stop",
      path: "slots[1].placement.heightPct",
      measured: 19,
      sentence: "Slot 1 is 19 lines too tall.",
      detail: "108 % of 240 lines is 259, and this mode shows 240. Tallest that fits at −3 lines: 97.6 %.",
      slots: [1],
    });
    expect(finding.remedies).toEqual([
      { kind: "set", label: "Use 97.6 %", patch: [{ path: "slots[1].placement.heightPct", value: 97.6 }] },
      { kind: "leave-out", label: "Leave slot 1 out", slot: 1 },
    ]);
  });

  it("offers the nearest offset too where the size itself fits", () => {
    const finding = theOne("placement.horizontal", {
      document: placed({ widthPct: 96, offsetPx: 40 }, "480p60"),
      device: lf8,
    });
    // ⌊720 · 0.96 + ½⌋ = 691, ⌊29 / 2⌋ = 14: 15 px are free on the right.
    expect(finding).toMatchObject({
      severity: "stop",
      sentence: "Slot 1 is 25 px too far right.",
      path: "slots[1].placement.offsetPx",
    });
    expect(labels(finding)).toEqual(["Use 88.8 %", "Use 15 px", "Leave slot 1 out"]);
  });

  it("is a stop where the device refuses, a caution where it cuts or is not known", () => {
    const document = placed({ heightPct: 108 });
    const severity = (device: typeof lf8 | undefined) => theOne("placement.vertical", { document, device }).severity;
    expect(severity(lf8)).toBe("stop");
    expect(severity({ ...lf8, outsideRaster: "cuts" })).toBe("caution");
    expect(severity(undefined)).toBe("caution");
  });

  it("works an interlaced mode in field lines", () => {
    const finding = theOne("placement.vertical", {
      document: placed({ heightPct: 100, offsetLines: 1 }, "480i60"),
      device: lf8,
    });
    expect(finding.sentence).toBe("Slot 1 is 1 field line too low.");
  });

  it("finds nothing at the edge, and nothing where no size is named", () => {
    expect(
      found("placement.vertical", { document: placed({ heightPct: 97.6, offsetLines: -3 }), device: lf8 }),
    ).toEqual([]);
    expect(found("placement.vertical", { document: placed({ offsetLines: -3 }), device: lf8 })).toEqual([]);
    expect(
      found("placement.vertical", {
        document: documentOf({ slots: [{ number: 1, placement: { heightPct: 120 } }] }),
        device: lf8,
      }),
    ).toEqual([]);
  });

  it("leaves a picture with no part inside to its shape", () => {
    const document = placed({ heightPct: 80, offsetLines: 500 });
    expect(found("placement.vertical", { document })).toEqual([]);
    expect(theOne("shape.nothing-inside", { document })).toMatchObject({ severity: "stop" });
  });
});
