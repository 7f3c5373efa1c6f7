import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { effectivePicture, placeExtent } from "@/lib/picture/effective-picture";
import { standardNames, standardRaster, type StandardName } from "@/lib/timing/standards";
import { activeFrameLines } from "@/lib/timing/rates";

const source = { activePx: 1280, activeLines: 720, interlaced: false, fieldRateHz: 60 };
const mode = (name: StandardName) => standardRaster(name).timing;
const picture = (input: Partial<Parameters<typeof effectivePicture>[0]>) => {
  const result = effectivePicture({ source, trim: {}, mode: mode("240p60"), placement: {}, ...input });
  if (!result.ok) throw new Error(result.error);
  return result.value;
};

describe("placeExtent", () => {
  it("rounds a size to ⌊active · pct / 100 + ½⌋ and starts at ⌊(active − size) / 2⌋ + offset", () => {
    expect(placeExtent(240, 108, -3)).toEqual({ first: -13, size: 259 });
    expect(placeExtent(240, 97.6, -3)).toEqual({ first: 0, size: 234 });
    expect(placeExtent(101, 50, 0)).toEqual({ first: 25, size: 51 });
  });

  it("keeps an exact half a half although binary fractions fall short of it", () => {
    expect(placeExtent(250, 100.2, 0).size).toBe(251);
    expect(placeExtent(1000, 0.15, 0).size).toBe(2);
    // 1.15 · 100 is 114.999… in binary; exact arithmetic in tenths of a percent says what it must be.
    for (let tenths = 1; tenths <= 2000; tenths += 1) {
      for (const active of [240, 250, 720, 1125]) {
        expect(placeExtent(active, tenths / 10, 0).size).toBe(
          Number((BigInt(active) * BigInt(tenths) * 2n + 1000n) / 2000n),
        );
      }
    }
  });
});

describe("effectivePicture", () => {
  it("lays a source without trim or placement over the whole active raster", () => {
    expect(picture({})).toEqual({
      source: { leftPx: 0, topLines: 0, widthPx: 1280, heightLines: 720 },
      placed: { leftPx: 0, topLines: 0, widthPx: 1440, heightLines: 240 },
      raster: { leftPx: 0, topLines: 0, widthPx: 1440, heightLines: 240 },
      cut: { leftPx: 0, rightPx: 0, topLines: 0, bottomLines: 0 },
      sourcePxPerOutputPx: 1280 / 1440,
      sourceLinesPerOutputLine: 3,
    });
  });

  it("takes 4 lines for each of 1 080 on 270, and 4.5 on 240 (common practice, no source)", () => {
    const full = { ...source, activePx: 1920, activeLines: 1080 };
    const of270 = { ...mode("240p60"), vertical: { ...mode("240p60").vertical, active: 270 } };
    expect(picture({ source: full, mode: of270 }).sourceLinesPerOutputLine).toBe(4);
    expect(picture({ source: full }).sourceLinesPerOutputLine).toBe(4.5);
  });

  it("says what the raster's edges cut, the size before the cut giving the ratio", () => {
    const { placed, raster, cut, sourceLinesPerOutputLine } = picture({
      placement: { heightPct: 108, offsetLines: -3 },
    });
    expect(placed).toMatchObject({ topLines: -13, heightLines: 259 });
    expect(raster).toMatchObject({ topLines: 0, heightLines: 240 });
    expect(cut).toEqual({ leftPx: 0, rightPx: 0, topLines: 13, bottomLines: 6 });
    expect(sourceLinesPerOutputLine).toBe(720 / 259);
  });

  it("works an interlaced mode in field lines and then doubles it", () => {
    const { placed, raster, cut, sourceLinesPerOutputLine } = picture({
      mode: mode("480i60"),
      placement: { heightPct: 97.6, offsetLines: 5 },
    });
    expect(placed).toMatchObject({ topLines: 16, heightLines: 468 });
    expect(raster).toMatchObject({ topLines: 16, heightLines: 464 });
    expect(cut.bottomLines).toBe(4);
    expect(sourceLinesPerOutputLine).toBe(720 / 468);
  });

  it("adds black where trim is negative, and stops where trim leaves nothing or placement puts nothing inside", () => {
    expect(picture({ trim: { leftPx: -10, topLines: 4 } }).source).toEqual({
      leftPx: -10,
      topLines: 4,
      widthPx: 1290,
      heightLines: 716,
    });
    const stop = (input: object) =>
      effectivePicture({ source, trim: {}, mode: mode("240p60"), placement: {}, ...input });
    expect(stop({ trim: { leftPx: 640, rightPx: 640 } })).toEqual({ ok: false, error: "nothing-left" });
    expect(stop({ placement: { heightPct: 50, offsetLines: 200 } })).toEqual({ ok: false, error: "nothing-inside" });
    expect(stop({ placement: { widthPct: 0 } })).toEqual({ ok: false, error: "nothing-inside" });
  });

  it("never leaves the active raster, and what is inside and what is cut are all of the picture", () => {
    const pct = fc.integer({ min: 1, max: 2000 }).map((tenths) => tenths / 10);
    const offset = fc.integer({ min: -400, max: 400 });
    fc.assert(
      fc.property(
        fc.constantFrom(...standardNames),
        pct,
        pct,
        offset,
        offset,
        (name, widthPct, heightPct, offsetPx, offsetLines) => {
          const result = effectivePicture({
            source,
            trim: {},
            mode: mode(name),
            placement: { widthPct, heightPct, offsetPx, offsetLines },
          });
          if (!result.ok) return;
          const { raster, placed, cut } = result.value;
          expect(raster.leftPx).toBeGreaterThanOrEqual(0);
          expect(raster.topLines).toBeGreaterThanOrEqual(0);
          expect(raster.leftPx + raster.widthPx).toBeLessThanOrEqual(mode(name).horizontal.active);
          expect(raster.topLines + raster.heightLines).toBeLessThanOrEqual(activeFrameLines(mode(name)));
          expect(raster.widthPx + cut.leftPx + cut.rightPx).toBe(placed.widthPx);
          expect(raster.heightLines + cut.topLines + cut.bottomLines).toBe(placed.heightLines);
        },
      ),
    );
  });
});
