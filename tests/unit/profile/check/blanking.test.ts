import { describe, expect, it } from "vitest";
import { applyPatch } from "@/lib/profile/paths";
import type { RasterTiming } from "@/lib/timing/raster";
import { lf8, oneSlot, television, timingOf } from "@/tests/unit/profile/samples";
import { found, labels, theOne } from "./find";

const base = timingOf("240p60");
const across = (part: Partial<RasterTiming["horizontal"]>): RasterTiming => ({
  ...base,
  horizontal: { ...base.horizontal, ...part },
});
const down = (part: Partial<RasterTiming["vertical"]>): RasterTiming => ({
  ...base,
  vertical: { ...base.vertical, ...part },
});

describe("blanking", () => {
  it("stops a sync of 0 on either axis", () => {
    expect(theOne("blanking.absent", { document: oneSlot({}, across({ sync: 0, backPorch: 238 })) })).toMatchObject({
      severity: "stop",
      path: "modes[a].timing.horizontal.sync",
    });
    expect(theOne("blanking.absent", { document: oneSlot({}, down({ sync: 0, backPorch: 18 })) })).toMatchObject({
      severity: "stop",
      path: "modes[a].timing.vertical.sync",
    });
  });

  it("stops what is under the screen's minimums, in µs and in clocks, with a remedy that keeps the totals", () => {
    const document = oneSlot({}, across({ sync: 100, backPorch: 138 }));
    const finding = theOne("blanking.sync", { document, screen: television, device: lf8 });
    // 100 clocks of 27 MHz are 3.70 µs; 4.5 µs are 121.5 clocks.
    expect(finding).toMatchObject({
      severity: "stop",
      unit: "µs",
      limit: 4.5,
      detail:
        "525-line television needs 4.50 µs at least, which is 122 clocks here. Nearest raster that fits: 240p60 (15.734 kHz, 60.054 Hz).",
    });
    expect(finding.remedies[0]).toEqual({
      kind: "set",
      label: "Use a sync of 122 px",
      patch: [
        { path: "modes[a].timing.horizontal.sync", value: 122 },
        { path: "modes[a].timing.horizontal.backPorch", value: 116 },
      ],
    });
  });

  it("stops field blanking under the screen's minimum", () => {
    const finding = theOne("blanking.field-blank", {
      document: oneSlot({}, down({ active: 250, backPorch: 5 })),
      screen: television,
    });
    expect(finding).toMatchObject({ severity: "stop", path: "modes[a].timing.vertical", limit: 1207 });
    expect(labels(finding)[0]).toBe("Use a back porch of 12 lines");
  });

  it("cautions against what lies outside what BT.470 and CTA-861 span together", () => {
    const finding = theOne("blanking.span", { document: oneSlot({}, across({ frontPorch: 70, active: 1408 })) });
    expect(finding).toMatchObject({
      severity: "caution",
      path: "modes[a].timing.horizontal.frontPorch",
      limitSource: "BT.470 and CTA-861",
    });
  });

  it("cautions against a back porch under 3.2 µs at 15 kHz (common practice, no source), not at 31 kHz", () => {
    const finding = theOne("blanking.clamp", {
      document: oneSlot({}, across({ frontPorch: 68, backPorch: 84 })),
      device: lf8,
    });
    expect(finding).toMatchObject({ severity: "caution", limit: 3.2, limitSource: "common practice, no source" });
    expect(finding.measured).toBeCloseTo(84 / 27, 6);
    expect(found("blanking.clamp", { document: oneSlot({}, timingOf("480p60")) })).toEqual([]);
    // BT.470's colour burst ends 3.1 µs after sync: CTA-861 code 8 has 4.22 µs of back porch.
    expect(found("blanking.clamp", { document: oneSlot({}) })).toEqual([]);
  });

  it("is gone once its remedy is taken", () => {
    const documents = [
      across({ sync: 100, backPorch: 138 }),
      across({ frontPorch: 68, backPorch: 84 }),
      down({ active: 250, backPorch: 5 }),
    ].map((timing) => oneSlot({}, timing));
    for (const document of documents) {
      const input = { document, screen: television, device: lf8 };
      for (const rule of ["blanking.sync", "blanking.field-blank", "blanking.clamp"]) {
        for (const finding of found(rule, input)) {
          const [remedy] = finding.remedies;
          if (remedy?.kind !== "set") throw new Error(`no remedy for ${rule}`);
          expect(found(rule, { ...input, document: applyPatch(document, remedy.patch) })).toEqual([]);
        }
      }
    }
  });
});
