import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { changeFigure, type FigureEdit } from "@/lib/timing/fit/change-figure";
import { editableFigures, type EditFigure } from "@/lib/timing/fit/editable-figures";
import { rasterProblems } from "@/lib/timing/raster-problems";
import { standardNames, standardRaster } from "@/lib/timing/standards";

const { timing } = standardRaster("240p60");
const device = { clockHz: { min: 5e6, max: 165e6, step: 50_000 } };

const change = (figure: EditFigure, value: number, keep: EditFigure[] = [], more: Partial<FigureEdit> = {}) => {
  const result = changeFigure({ timing, figure, value, keep, ...more });
  if (!result.ok) return result.error;
  const { changed } = result.value;
  return Object.fromEntries(changed.map(({ figure: name, to }) => [name, Number(to.toFixed(3))]));
};

describe("changing one figure", () => {
  it("shows what else changes", () => {
    // By hand: 27 MHz / 1716 / 264 = 59.600; 264 · 60.054449 = 15 854.375 Hz, · 1716 = 27.206 MHz.
    expect(change("activeLines", 242)).toEqual({ activeLines: 242, fieldLines: 264, fieldRateHz: 59.599 });
    expect(change("activeLines", 242, ["fieldRateHz"])).toEqual({
      activeLines: 242,
      fieldLines: 264,
      fieldRateHz: 60.054,
      lineRateHz: 15_854.375,
      pixelClockHz: 27_206_107,
    });
    expect(change("activeLines", 242, ["fieldLines"])).toMatchObject({ activeLines: 242, "vertical.backPorch": 13 });
  });

  it("moves the picture by the porches and leaves totals and rates alone", () => {
    expect(change("horizontal.backPorch", 120)).toEqual({ "horizontal.backPorch": 120, "horizontal.frontPorch": 32 });
    expect(change("vertical.frontPorch", 6)).toEqual({ "vertical.frontPorch": 6, "vertical.backPorch": 13 });
    expect(change("horizontal.sync", 130, ["horizontal.backPorch"])).toEqual({
      "horizontal.sync": 130,
      "horizontal.frontPorch": 32,
    });
  });

  it("makes a rate by the clock, or by the line total where the clock is kept", () => {
    expect(change("fieldRateHz", 60)).toMatchObject({ pixelClockHz: 26_975_520, fieldRateHz: 60 });
    expect(change("fieldRateHz", 60, ["pixelClockHz"])).toMatchObject({ lineTotal: 1718, fieldRateHz: 59.985 });
    expect(change("fieldRateHz", 50, ["pixelClockHz", "lineRateHz"])).toMatchObject({
      fieldLines: 315,
      fieldRateHz: 49.95,
    });
  });

  it("keeps to the device's clocks", () => {
    expect(change("fieldRateHz", 60, [], { device })).toMatchObject({});
    expect(change("pixelClockHz", 27_012_345, [], { device })).toEqual({});
  });

  it("says which locks stand in the way", () => {
    expect(change("activeLines", 242, ["fieldLines", "vertical.frontPorch", "vertical.backPorch"])).toMatchObject({
      code: "locked",
    });
    const locked = change("fieldRateHz", 50, ["pixelClockHz", "lineTotal", "fieldLines"]);
    expect(locked).toMatchObject({
      code: "locked",
      by: expect.arrayContaining(["pixelClockHz", "lineTotal", "fieldLines"]) as unknown,
    });
  });

  it("refuses what no raster has", () => {
    expect(change("activePx", -5)).toMatchObject({ code: "impossible" });
    expect(change("fieldRateHz", Number.NaN)).toMatchObject({ code: "impossible" });
    expect(change("horizontal.sync", 1.5)).toMatchObject({ code: "impossible" });
    expect(change("pixelClockHz", 0)).toMatchObject({ code: "impossible" });
  });

  it("leaves a raster, and whatever is kept, for any edit of any standard", () => {
    const figures = Object.keys(editableFigures(timing)) as EditFigure[];
    const edit = fc.record({
      name: fc.constantFrom(...standardNames),
      figure: fc.constantFrom(...figures),
      factor: fc.constantFrom(0.5, 0.9, 0.99, 1.01, 1.1, 2),
      keep: fc.subarray(figures, { maxLength: 4 }),
    });
    fc.assert(
      fc.property(edit, ({ name, figure, factor, keep }) => {
        const from = standardRaster(name).timing;
        const before = editableFigures(from);
        const value = figure.endsWith("Hz") ? before[figure] * factor : Math.round(before[figure] * factor);
        const result = changeFigure({ timing: from, figure, value, keep });
        if (!result.ok) {
          if (result.error.code === "locked") expect(result.error.by.length).toBeGreaterThan(0);
          return;
        }
        const after = editableFigures(result.value.timing);
        expect(rasterProblems(result.value.timing)).toEqual([]);
        for (const kept of keep) {
          if (kept === figure) continue;
          if (kept.endsWith("RateHz"))
            expect(Math.abs(after[kept] / before[kept] - 1)).toBeLessThan(1 / before.lineTotal);
          else expect(after[kept]).toBe(before[kept]);
        }
        if (!figure.endsWith("Hz")) expect(after[figure]).toBe(value);
      }),
      { numRuns: 400 },
    );
  });
});
