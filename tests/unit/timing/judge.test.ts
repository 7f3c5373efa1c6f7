import { describe, expect, it } from "vitest";
import { blankingSpan } from "@/lib/timing/blanking-span";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { envelopeProblems } from "@/lib/timing/envelope-problems";
import { judgeBlanking } from "@/lib/timing/judge-blanking";
import { fitsEnvelope, judgeEnvelope, type RasterRule } from "@/lib/timing/judge-envelope";
import type { RasterTiming } from "@/lib/timing/raster";
import { fieldRateHz, lineRateHz } from "@/lib/timing/rates";
import { standardRaster } from "@/lib/timing/standards";

const timing = standardRaster("240p60").timing;
const line = lineRateHz(timing);
const field = fieldRateHz(timing);
const open: ScreenEnvelope = {
  name: "all known, wide",
  bands: [{ lineRateHz: [15_000, 16_000], fieldRateHz: [48, 62] }],
};
const verdict = (rule: RasterRule, screen: ScreenEnvelope, of: RasterTiming = timing) => {
  const found = judgeEnvelope(of, screen).find((one) => one.rule === rule);
  if (found === undefined) throw new Error(`no verdict on ${rule}`);
  return found;
};

describe("judgeEnvelope", () => {
  it("answers every limit, and calls unknown what the screen does not name", () => {
    const verdicts = judgeEnvelope({ ...timing, interlaced: true }, { name: "blank", bands: [] });
    expect(verdicts.map(({ rule, outcome }) => [rule, outcome])).toEqual([
      ["line-rate", "unknown"],
      ["field-rate", "unknown"],
      ["interlace", "unknown"],
      ["clock", "unknown"],
      ["sync", "unknown"],
      ["back-porch", "unknown"],
      ["field-blank", "unknown"],
    ]);
  });

  it.each([
    [1 - 9e-7, "inside"],
    [1, "inside"],
    [1 + 9e-7, "inside"],
    [1 + 1.1e-6, "outside"],
  ])("holds a lower end of %f times the value as %s", (factor, outcome) => {
    const screen = { ...open, bands: [{ lineRateHz: [line * factor, 16_000], fieldRateHz: [48, 62] }] } as const;
    expect(verdict("line-rate", screen).outcome).toBe(outcome);
  });

  it.each([
    [1 - 9e-7, "inside"],
    [1 - 1.1e-6, "outside"],
  ])("holds an upper end of %f times the value as %s", (factor, outcome) => {
    const screen = { ...open, bands: [{ lineRateHz: [15_000, 16_000], fieldRateHz: [48, field * factor] }] } as const;
    expect(verdict("field-rate", screen).outcome).toBe(outcome);
  });

  it("wants one band to hold both rates", () => {
    const split: ScreenEnvelope = {
      name: "split",
      bands: [
        { lineRateHz: [15_700, 15_800], fieldRateHz: [49, 51] },
        { lineRateHz: [31_000, 32_000], fieldRateHz: [59, 61] },
      ],
    };
    expect(verdict("line-rate", split).outcome).toBe("inside");
    expect(verdict("field-rate", split)).toMatchObject({ outcome: "outside", min: 49, max: 51, nearest: 51 });
  });

  it("tells the nearest line rate of a band that holds the field rate", () => {
    const screen: ScreenEnvelope = {
      name: "two",
      bands: [
        { lineRateHz: [15_000, 15_700], fieldRateHz: [49, 51] },
        { lineRateHz: [16_000, 17_000], fieldRateHz: [59, 61] },
      ],
    };
    expect(verdict("line-rate", screen)).toMatchObject({ outcome: "outside", min: 16_000, nearest: 16_000 });
    expect(verdict("field-rate", screen).outcome).toBe("inside");
  });

  it("refuses an interlaced raster on a screen without interlace, and only there", () => {
    const interlaced = standardRaster("480i60").timing;
    expect(verdict("interlace", { ...open, interlace: false }, interlaced)).toMatchObject({
      outcome: "outside",
      measured: 2,
      nearest: 1,
    });
    expect(verdict("interlace", { ...open, interlace: true }, interlaced).outcome).toBe("inside");
    expect(verdict("interlace", { ...open, interlace: false }).outcome).toBe("inside");
  });

  it("tells the fewest clocks and lines that reach a minimum, and they do", () => {
    const screen = { ...open, minSyncUs: 4.7, minBackPorchUs: 5, minFieldBlankUs: 1450 };
    const [sync, back, blank] = (["sync", "back-porch", "field-blank"] as const).map((rule) => verdict(rule, screen));
    expect(sync).toMatchObject({ outcome: "outside", nearest: 4.7, nearestCount: { count: 127, unit: "clocks" } });
    expect(back).toMatchObject({ outcome: "outside", nearest: 5, nearestCount: { count: 135, unit: "clocks" } });
    expect(blank).toMatchObject({ outcome: "outside", nearest: 1450, nearestCount: { count: 23, unit: "lines" } });
    const widened = (frontPorch: number): RasterTiming => ({ ...timing, vertical: { ...timing.vertical, frontPorch } });
    expect(verdict("field-blank", screen, widened(4)).outcome).toBe("outside");
    expect(verdict("field-blank", screen, widened(5)).outcome).toBe("inside");
  });

  it("carries the source of each limit", () => {
    const screen: ScreenEnvelope = {
      ...open,
      maxPixelClockHz: 20e6,
      sources: { bands: "edid", maxPixelClockHz: "guess" },
    };
    expect(verdict("clock", screen)).toMatchObject({ outcome: "outside", nearest: 20e6, source: "guess" });
    expect(verdict("line-rate", screen).source).toBe("edid");
    expect(verdict("sync", screen).source).toBeUndefined();
  });

  it("lets nothing into a crossed band", () => {
    const crossed: ScreenEnvelope = {
      name: "crossed",
      bands: [{ lineRateHz: [16_000, 15_000], fieldRateHz: [48, 62] }],
    };
    expect(fitsEnvelope(timing, crossed)).toBe(false);
    expect(envelopeProblems(crossed).map(({ path }) => path)).toEqual(["bands[0].lineRateHz"]);
  });
});

describe("envelopeProblems", () => {
  it("bounds the bands and refuses what is no limit", () => {
    const band = { lineRateHz: [15_000, 16_000], fieldRateHz: [48, 62] } as const;
    expect(envelopeProblems(open)).toEqual([]);
    expect(envelopeProblems({ name: "many", bands: Array.from({ length: 1e5 }, () => band) })).toHaveLength(1);
    expect(envelopeProblems({ name: "endless", bands: [{ ...band, fieldRateHz: [48, Infinity] }] })[0]?.path).toBe(
      "bands[0].fieldRateHz",
    );
    expect(envelopeProblems({ ...open, minSyncUs: Number.NaN, syncVpp: [1, 0.5] }).map(({ path }) => path)).toEqual([
      "minSyncUs",
      "syncVpp",
    ]);
  });
});

describe("judgeBlanking", () => {
  const withSync = (sync: number): RasterTiming => ({
    ...timing,
    horizontal: { ...timing.horizontal, sync, backPorch: timing.horizontal.backPorch + 124 - sync },
  });
  const outside = (of: RasterTiming) =>
    judgeBlanking(of)
      .filter(({ outcome }) => outcome !== "inside")
      .map(({ axis, part, outcome, nearest }) => [axis, part, outcome, nearest]);

  it("calls a sync of 0 absent on either axis", () => {
    expect(outside(withSync(0))).toContainEqual(["horizontal", "sync", "absent", 4.5]);
    expect(outside({ ...timing, vertical: { ...timing.vertical, sync: 0, backPorch: 18 } })).toContainEqual([
      "vertical",
      "sync",
      "absent",
      2.5,
    ]);
  });

  it("finds a sync shorter than any 15 kHz standard, and takes one at the end of the span", () => {
    // Source: ITU-R BT.470-5, 625/50: 4.7 ± 0.2 µs; 4.5 µs are 121.5 clocks of 27 MHz.
    expect(outside(withSync(121)).map(([, part]) => part)).toEqual(["sync"]);
    expect(outside(withSync(122))).toEqual([]);
  });

  it("takes a published raster whose clock a device has rounded", () => {
    const vga = standardRaster("480p60-640").timing;
    expect(outside({ ...vga, pixelClockHz: 25_150_000 })).toEqual([]);
  });

  it("says nothing of a line rate that no standard is near, an absent sync aside", () => {
    const odd = { ...timing, pixelClockHz: 40_000_000 };
    expect(blankingSpan(lineRateHz(odd))).toBeUndefined();
    expect(outside(odd)).toEqual([]);
    expect(outside({ ...withSync(0), pixelClockHz: 40_000_000 })).toEqual([
      ["horizontal", "sync", "absent", undefined],
    ]);
  });
});
