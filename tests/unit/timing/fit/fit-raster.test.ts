import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { blankingSpan } from "@/lib/timing/blanking-span";
import { fitRaster } from "@/lib/timing/fit/fit-raster";
import type { FitConstraint, FitRequest } from "@/lib/timing/fit/fit-types";
import { holdsRaster } from "@/lib/timing/fit/search";
import { searchSpace } from "@/lib/timing/fit/search-space";
import { brokenDeviceLimits } from "@/lib/timing/fit/within-device";
import { judgeBlanking } from "@/lib/timing/judge-blanking";
import { fitsEnvelope } from "@/lib/timing/judge-envelope";
import { rasterProblems } from "@/lib/timing/raster-problems";
import { activeFrameLines, axisBlank, fieldLines, fieldRateHz, horizontalUs, lineRateHz } from "@/lib/timing/rates";
import { inSpan } from "@/lib/timing/span";
import { anyRequest, outcome, television, wide, wish240 } from "@/tests/unit/timing/fit/requests";

/** Drawn once, since a request that fits nowhere is searched for long; each property is held against all of them. */
const drawn = fc.sample(anyRequest, 40).map((request) => ({ request, found: outcome(request), name: JSON.stringify(request) }));

const lf8 = { clockHz: { min: 5e6, max: 165e6, step: 50_000 } };

describe("rasters that fit", () => {
  it("pass every check, whatever is asked", () => {
    for (const { request, found, name } of drawn) {
      for (const { timing } of [...found.fits, ...found.nearest]) {
        expect(rasterProblems(timing), name).toEqual([]);
        expect(fitsEnvelope(timing, request.screen), name).toBe(true);
        expect(brokenDeviceLimits(timing, request.device ?? {}), name).toEqual([]);
      }
      for (const { timing, rateErrorHz } of found.fits) {
        expect(activeFrameLines(timing), name).toBe(request.wish.activeLines);
        expect(timing.horizontal.active, name).toBe(request.wish.activePx);
        expect(fieldRateHz(timing) - request.wish.fieldRateHz, name).toBeCloseTo(rateErrorHz, 9);
        expect(Math.abs(rateErrorHz), name).toBeLessThanOrEqual(0.0051 * request.wish.fieldRateHz);
      }
    }
  });

  it("have sync and blanking within BT.470 and CTA-861 at 15 kHz, where the owner locks nothing", () => {
    // Source: ITU-R BT.470-5 and CTA-861, through blankingSpan, whose own values standards.test.ts compares.
    const span = blankingSpan(15_734);
    if (span === undefined) throw new Error("no 15 kHz standard");
    for (const { found, name } of drawn) {
      for (const { timing, lineRateHz: rate } of found.fits) {
        if (rate > 16_800) continue;
        const us = horizontalUs(timing);
        const lineBlankUs = us.frontPorch + us.sync + us.backPorch;
        expect(inSpan(us.sync, span.horizontalUs.sync) && inSpan(lineBlankUs, span.horizontalUs.blank), name).toBe(true);
        expect(inSpan(timing.vertical.sync, span.verticalLines.sync), name).toBe(true);
        expect(inSpan(axisBlank(timing.vertical), span.verticalLines.blank), name).toBe(true);
        if (blankingSpan(rate) === span)
          expect(judgeBlanking(timing).filter(({ outcome: is }) => is !== "inside"), name).toEqual([]);
      }
    }
  });

  it("are ranked by rate error, then by porches, and one a count of field lines unless published", () => {
    const { fits } = outcome({ wish: wish240, screen: television, device: lf8 });
    const errors = fits.map(({ rateErrorHz }) => Math.round(Math.abs(rateErrorHz) * 1000));
    expect(errors).toEqual([...errors].sort((a, b) => a - b));
    const searched = fits.filter(({ standard }) => standard === undefined).map(({ timing }) => fieldLines(timing));
    expect(new Set(searched).size).toBe(searched.length);
    expect(fits.map(({ standard }) => standard)).toContain("cta-861-8");
  });

  it("are the published raster itself where it meets the wish exactly", () => {
    // Source: CTA-861 code 6, tests/fixtures/standards/vic.json.
    const { fits } = outcome({
      wish: { activeLines: 480, activePx: 1440, fieldRateHz: 60_000 / 1001, interlaced: true },
      screen: television,
    });
    expect(fits[0]).toMatchObject({ standard: "cta-861-6", porchCost: 0 });
    expect(fits[0]?.rateErrorHz).toBeCloseTo(0, 9);
  });

  it("keep what the owner states, and say where that leaves the standards", () => {
    const fixed = outcome({
      wish: { ...wish240, activeLines: 244, pixelClockHz: 27e6 },
      screen: television,
      device: lf8,
    });
    expect(fixed.fits.length).toBeGreaterThan(0);
    for (const { timing } of fixed.fits) expect(timing.pixelClockHz).toBe(27e6);
    const tall = outcome({ wish: { ...wish240, fieldRateHz: 50, fieldLines: 312 }, screen: television });
    expect(tall.fits[0]?.timing.vertical).toMatchObject({ active: 240, sync: 3 });
    expect(tall.fits[0]?.notes.join(" ")).toContain("Field blanking of 72");
  });

  it("follow the source's rate exactly where the device's clock does", () => {
    const device = { clockHz: { min: 5e6, max: 165e6, step: 1e6 }, outputClock: "input" } as const;
    const [best] = outcome({ wish: { ...wish240, fieldRateHz: 59.7275 }, screen: television, device }).fits;
    expect(Math.abs(best?.rateErrorHz ?? 1)).toBeLessThan(1e-5);
  });
});

/** The same request with one of its limits taken away, by hand. */
function relaxed({ wish, screen, device, ...rest }: FitRequest, constraints: readonly FitConstraint[]): FitRequest {
  const has = (constraint: FitConstraint) => constraints.includes(constraint);
  const bands = screen.bands.map((band) => ({
    lineRateHz: has("screen-line-rate") ? ([1, 1e7] as const) : band.lineRateHz,
    fieldRateHz: has("screen-field-rate") ? ([1, 1e4] as const) : band.fieldRateHz,
  }));
  const unless = <T>(constraint: FitConstraint, value: T) => (has(constraint) ? undefined : value);
  const clock = device?.clockHz;
  const step = has("device-clock-step") ? 1 : clock?.step;
  return {
    ...rest,
    wish,
    screen: {
      ...screen,
      bands,
      interlace: unless("screen-interlace", screen.interlace),
      maxPixelClockHz: unless("screen-clock", screen.maxPixelClockHz),
      minSyncUs: unless("screen-sync", screen.minSyncUs),
      minBackPorchUs: unless("screen-back-porch", screen.minBackPorchUs),
      minFieldBlankUs: unless("screen-field-blank", screen.minFieldBlankUs),
    },
    device: {
      ...device,
      clockHz: clock && {
        min: has("device-clock") ? 0 : clock.min,
        max: has("device-clock") ? 1e10 : clock.max,
        step: step ?? 1,
      },
      horizontalMultiple: unless("device-multiple", device?.horizontalMultiple),
      maxLineTotal: unless("device-line-total", device?.maxLineTotal),
      maxFieldLines: unless("device-field-lines", device?.maxFieldLines),
      interlace: unless("device-interlace", device?.interlace),
    },
  };
}

/** Taken away where no request can say so: the standards' spans, and the field rate's tolerance. */
const internal: readonly FitConstraint[] = ["standard-line-blank", "standard-field-blank", "wish-field-rate"];

describe("when nothing fits", () => {
  it("names constraints without which a raster fits: each alone, or all together", () => {
    let blocked = 0;
    for (const { request, found, name } of drawn) {
      const { fits, blockedBy } = found;
      if (fits.length > 0) {
        expect(blockedBy, name).toEqual([]);
        continue;
      }
      blocked += 1;
      expect(blockedBy.length, name).toBeGreaterThan(0);
      const sets =
        blockedBy[0]?.alone === true
          ? blockedBy.map((one) => [one.constraint])
          : [blockedBy.map((one) => one.constraint)];
      for (const set of sets) {
        const inner = new Set(set.filter((constraint) => internal.includes(constraint)));
        expect(holdsRaster(searchSpace(relaxed(request, set), inner)), name).toBe(true);
      }
      for (const { sentence } of blockedBy) expect(sentence, name).toMatch(/\.$/u);
    }
    expect(blocked).toBeGreaterThan(8);
  });

  it("does the sum for 270 lines at 60 Hz on a 15 kHz screen", () => {
    // By hand: 270 + 20 = 290; 290 · 60 = 17 400; 15 892 / 290 = 54.80; ⌊15 892 / 60⌋ − 20 = 244.
    const { fits, blockedBy, nearest } = outcome({
      wish: { ...wish240, activeLines: 270 },
      screen: television,
      device: lf8,
    });
    expect(fits).toEqual([]);
    expect(blockedBy).toHaveLength(1);
    expect(blockedBy[0]).toMatchObject({
      constraint: "screen-line-rate",
      needed: 17_400,
      limit: 15_892,
      totalLines: 290,
      blankLines: 20,
      alone: true,
    });
    expect(blockedBy[0]?.fieldRateAtLimitHz).toBeCloseTo(54.8, 2);
    expect(blockedBy[0]?.sentence.replaceAll(/[\u00A0\u2009]/gu, " ")).toBe(
      "270 lines need 290 in all with 20 of blanking; at 60 Hz that is 17.4 kHz and this screen ends at 15.892 kHz; at its fastest they run at 54.8 Hz.",
    );
    const given = nearest.map(({ timing, changed }) => [
      activeFrameLines(timing),
      changed.map(({ figure }) => figure).join(),
    ]);
    expect(given).toContainEqual([244, "activeLines"]);
    expect(given).toContainEqual([270, "fieldRateHz"]);
    expect(nearest.some(({ standard }) => standard === "cta-861-8")).toBe(true);
    // Common practice, no source: 270 lines at the 525-line rate run at about 54 Hz.
    const atStandard = nearest.find(({ lineRateHz: rate }) => Math.abs(rate / 15_734.266 - 1) < 1e-4 && rate > 0);
    expect(atStandard?.timing.vertical.active).toBe(270);
    expect(Math.round(atStandard?.fieldRateHz ?? 0)).toBe(54);
  });

  it("puts what the owner keeps before what it costs least to change", () => {
    const request = { wish: { ...wish240, activeLines: 270 }, screen: television, device: lf8 };
    const [first] = outcome({ ...request, keep: ["fieldRateHz"] }).nearest;
    const [other] = outcome({ ...request, keep: ["activeLines"] }).nearest;
    expect(first?.changed.map(({ figure, kept }) => [figure, kept])).toEqual([["activeLines", false]]);
    expect(other?.changed.map(({ figure, kept }) => [figure, kept])).toEqual([["fieldRateHz", false]]);
  });

  it("offers the interlaced raster for 480 lines, and the progressive one where interlace is refused", () => {
    const tall = outcome({ wish: { ...wish240, activeLines: 480 }, screen: television });
    expect(tall.blockedBy.map(({ constraint }) => constraint)).toContain("screen-line-rate");
    expect(tall.nearest[0]?.timing.interlaced).toBe(true);
    const refused = outcome({
      wish: { ...wish240, activeLines: 480, interlaced: true },
      screen: { ...television, interlace: false },
    });
    expect(refused.blockedBy.map(({ constraint }) => constraint)).toEqual(["screen-interlace"]);
    expect(refused.nearest.every(({ timing }) => !timing.interlaced)).toBe(true);
  });

  it("finds another width where the clock or the multiple is in the way", () => {
    const slow = outcome({
      wish: { ...wish240, activePx: 1920 },
      screen: television,
      device: { clockHz: { min: 5e6, max: 30e6, step: 1000 } },
    });
    expect(slow.blockedBy.map(({ constraint }) => constraint)).toEqual(["device-clock"]);
    expect(slow.nearest[0]?.changed.map(({ figure }) => figure)).toEqual(["activePx"]);
    const coarse = outcome({
      wish: { ...wish240, activePx: 721 },
      screen: television,
      device: { horizontalMultiple: 8 },
    });
    expect(coarse.blockedBy.map(({ constraint }) => constraint)).toEqual(["device-multiple"]);
    expect(coarse.nearest[0]?.timing.horizontal.active).toBe(720);
  });
});

describe("requests that cannot be answered", () => {
  const paths = (request: FitRequest) => {
    const result = fitRaster(request);
    return result.ok ? [] : result.error.map(({ path }) => path);
  };

  it("are refused by path, at once", () => {
    expect(paths({ wish: { ...wish240, fieldRateHz: Number.NaN }, screen: wide })).toEqual(["fieldRateHz"]);
    expect(paths({ wish: { ...wish240, activeLines: -240 }, screen: wide })).toEqual(["activeLines"]);
    expect(paths({ wish: { ...wish240, activePx: 1e15 }, screen: wide })).toEqual(["activePx"]);
    expect(paths({ wish: { ...wish240, activeLines: 481, interlaced: true }, screen: wide })).toEqual(["activeLines"]);
    expect(paths({ wish: wish240, screen: wide, limit: 1e9 })).toEqual(["limit"]);
    expect(paths({ wish: wish240, screen: wide, device: { clockHz: { min: 2e7, max: 1e7, step: 0 } } })).toEqual([
      "device.clockHz.step",
      "device.clockHz",
    ]);
    const crossed = { name: "crossed", bands: [{ lineRateHz: [16_000, 15_000], fieldRateHz: [62, 48] }] } as const;
    expect(paths({ wish: wish240, screen: crossed })).toEqual([
      "screen.bands[0].lineRateHz",
      "screen.bands[0].fieldRateHz",
    ]);
  });

  it("take a screen of which nothing is known as open, and say what is not known", () => {
    const [best] = outcome({ wish: wish240, screen: { name: "unknown", bands: [] } }).fits;
    expect(best && lineRateHz(best.timing)).toBeCloseTo(15_720, -1);
    expect(best?.notes.join(" ")).toContain("Not known of this screen: line rates, field rates");
  });
});

describe("requests that are made to take for ever", () => {
  // Bounded by tries, not by time: fit/budget.ts. Each of these would look at millions of rasters.
  const bands = Array.from({ length: 16 }, (_, index) => ({
    lineRateHz: [100 + index, 1e6 + index] as const,
    fieldRateHz: [1, 1000] as const,
  }));

  it.each([
    [16, 16, 1],
    [16, 240, 1],
    [16_000, 8000, 1],
    [16_000, 240, 60],
    [720, 8000, 1000],
  ])(
    "are answered: %i px, %i lines, %f Hz",
    (activePx, activeLines, fieldRateHz) => {
      const clockHz = { min: 1, max: 2e10, step: 0.001 };
      const wish = { activePx, activeLines, fieldRateHz, interlaced: false };
      const screen = { name: "hostile", bands, minSyncUs: 1000, minBackPorchUs: 1000 };
      const result = fitRaster({ wish, screen, device: { clockHz, horizontalMultiple: 16 }, limit: 64 });
      if (result.ok) expect(result.value.fits).toEqual([]);
      else expect(result.error[0]?.message).not.toBe("");
    },
    60_000,
  );
});
