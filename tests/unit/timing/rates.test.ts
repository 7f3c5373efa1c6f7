import { describe, expect, it } from "vitest";
import { describeRaster } from "@/lib/timing/describe-raster";
import { modeName } from "@/lib/timing/mode-name";
import {
  fieldBlankUs,
  fieldRateHz,
  frameLines,
  linePeriodUs,
  lineRateHz,
  linesPerField,
  lineTotal,
} from "@/lib/timing/rates";
import { rasterProblems } from "@/lib/timing/raster-problems";
import { standardNames, standardRaster } from "@/lib/timing/standards";
import { publishedDmts, publishedVics, rasterOf, type PublishedTiming } from "@/tests/fixtures/standards/read";

/** Equal at a printed figure's precision: within half its last decimal (ties are printed to even). */
function agreesAsPrinted(ours: number, printed: number, decimals: number) {
  expect(Math.abs(ours - printed)).toBeLessThanOrEqual(0.5 * 10 ** -decimals + 1e-9);
}

function expectPublishedRates(published: PublishedTiming) {
  const timing = rasterOf(published);
  expect(lineTotal(timing)).toBe(published.htotal);
  expect(frameLines(timing)).toBe(published.vtotal_frame);
  expect(linesPerField(timing)).toBe(published.lines_per_field);
  const exactLineRate = (published.pixel_clock_khz * 1000) / published.htotal;
  const exactFieldRate = exactLineRate / published.lines_per_field;
  expect(Math.abs(lineRateHz(timing) / exactLineRate - 1)).toBeLessThan(1e-6);
  expect(Math.abs(fieldRateHz(timing) / exactFieldRate - 1)).toBeLessThan(1e-6);
  agreesAsPrinted(lineRateHz(timing) / 1000, published.hfreq_khz, 3);
  agreesAsPrinted(fieldRateHz(timing), published.vfreq_hz, 6);
}

describe("rates of published rasters", () => {
  // Source: tests/fixtures/standards/vic.json, as printed by `edid-decode --vic N`.
  it.each(publishedVics())("CTA-861 code %i has its printed totals and rates", (_code, published) => {
    expectPublishedRates(published);
  });

  // Source: tests/fixtures/standards/dmt.json, as printed by `edid-decode --dmt 0xNN`.
  it.each(publishedDmts())("VESA DMT %i has its printed totals and rates", (_code, published) => {
    expectPublishedRates(published);
  });

  it("gives equal fields the even frame of CTA-861 code 39", () => {
    // Source: `edid-decode --vic 39`: 31.250 kHz, 50.000000 Hz, "Both Fields".
    const timing = {
      pixelClockHz: 72e6,
      interlaced: true,
      equalFields: true,
      horizontal: { active: 1920, frontPorch: 32, sync: 168, backPorch: 184, polarity: "positive" },
      vertical: { active: 540, frontPorch: 23, sync: 5, backPorch: 57, polarity: "negative" },
    } as const;
    expect(frameLines(timing)).toBe(1250);
    expect(lineRateHz(timing)).toBe(31_250);
    expect(fieldRateHz(timing)).toBe(50);
  });
});

describe("the analogue systems", () => {
  // Source: ITU-R BT.470-5, tests/fixtures/standards/analog.json.
  it("meets the line and field rates of 525/60", () => {
    const { timing } = standardRaster("480i60");
    expect(frameLines(timing)).toBe(525);
    expect(Math.abs(lineRateHz(timing) / (4.5e6 / 286) - 1)).toBeLessThan(1e-12);
    agreesAsPrinted(fieldRateHz(timing), 59.94, 2);
    agreesAsPrinted(linePeriodUs(timing), 63.5555, 3);
  });

  it("meets the line and field rates of 625/50 exactly", () => {
    const { timing } = standardRaster("576i50");
    expect([frameLines(timing), lineRateHz(timing), fieldRateHz(timing), linePeriodUs(timing)]).toEqual([
      625, 15_625, 50, 64,
    ]);
  });

  it("counts half a line into the blanking of each interlaced field", () => {
    const line = linePeriodUs(standardRaster("480i60").timing);
    expect(fieldBlankUs(standardRaster("480i60").timing)).toBeCloseTo(22.5 * line, 9);
    expect(fieldBlankUs(standardRaster("240p60").timing)).toBeCloseTo(22 * line, 9);
  });
});

describe("names and figures", () => {
  it("names a mode by frame lines, scan and whole field rate", () => {
    const names = standardNames.map((name) => modeName(standardRaster(name).timing));
    expect(names).toEqual(["240p60", "288p50", "480i60", "576i50", "480p60", "480p60", "576p50"]);
  });

  it("describes a raster with parts that add up to its line and field", () => {
    const { timing } = standardRaster("240p60");
    const figures = describeRaster(timing);
    const sum = (parts: object) => Object.values(parts).reduce<number>((total, part: number) => total + part, 0);
    expect(sum(figures.horizontalUs)).toBeCloseTo(1e6 / figures.lineRateHz, 9);
    expect(sum(figures.verticalLines)).toBe(figures.fieldLines);
    expect(figures).toMatchObject({ lineTotal: 1716, fieldLines: 262, frameLines: 262 });
  });
});

describe("rasterProblems", () => {
  const { timing } = standardRaster("240p60");

  it("takes every standard raster", () => {
    expect(standardNames.flatMap((name) => rasterProblems(standardRaster(name).timing))).toEqual([]);
  });

  it.each([
    ["a fraction", { ...timing, horizontal: { ...timing.horizontal, sync: 1.5 } }, "horizontal.sync"],
    ["a negative porch", { ...timing, vertical: { ...timing.vertical, frontPorch: -1 } }, "vertical.frontPorch"],
    ["no picture", { ...timing, vertical: { ...timing.vertical, active: 0 } }, "vertical.active"],
    ["a size beyond any use", { ...timing, horizontal: { ...timing.horizontal, active: 65_536 } }, "horizontal.active"],
    ["no clock", { ...timing, pixelClockHz: 0 }, "pixelClockHz"],
    ["a clock that is no number", { ...timing, pixelClockHz: Number.NaN }, "pixelClockHz"],
    ["equal fields in a progressive raster", { ...timing, equalFields: true }, "equalFields"],
  ])("refuses %s", (_what, bad, path) => {
    expect(rasterProblems(bad).map((problem) => problem.path)).toEqual([path]);
  });
});

it("takes about 16 ms for a 60 Hz field (common practice, no source)", () => {
  const fieldMs = 1000 / fieldRateHz(standardRaster("240p60").timing);
  expect(Math.abs(fieldMs - 16)).toBeLessThan(1);
});
