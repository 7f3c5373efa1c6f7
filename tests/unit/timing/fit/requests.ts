import fc from "fast-check";
import type { FitOutcome, FitRequest, FitWish } from "@/lib/timing/fit/fit-types";
import { fitRaster } from "@/lib/timing/fit/fit-raster";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { DeviceTimingLimits } from "@/lib/timing/raster";
import { screenPresets } from "@/lib/timing/screen-presets";

export const wide: ScreenEnvelope = { name: "wide", bands: [{ lineRateHz: [15_000, 80_000], fieldRateHz: [45, 100] }] };

/** The wide television of the Modes page: what it takes beyond its rates is not known. */
export const television: ScreenEnvelope = {
  name: "television",
  bands: [{ lineRateHz: [15_450, 15_892], fieldRateHz: [48, 62] }],
};

export const wish240: FitWish = { activeLines: 240, activePx: 1440, fieldRateHz: 60, interlaced: false };

/** The outcome of a request that has no problems. */
export function outcome(request: FitRequest): FitOutcome {
  const result = fitRaster(request);
  if (!result.ok) throw new Error(result.error.map(({ path, message }) => `${path}: ${message}`).join(" "));
  return result.value;
}

const wish = fc
  .record({
    lines: fc.constantFrom(200, 224, 240, 256, 270, 288, 480, 576, 720),
    activePx: fc.constantFrom(320, 512, 640, 720, 1440, 1920),
    fieldRateHz: fc.constantFrom(49.7, 50, 54, 57.5, 59.94, 60, 60.1),
    interlaced: fc.boolean(),
  })
  .map(({ lines, ...rest }): FitWish => ({ activeLines: lines, ...rest }));

const device = fc.record(
  {
    clockHz: fc.constantFrom(
      { min: 5e6, max: 165e6, step: 50_000 },
      { min: 5e6, max: 30e6, step: 1000 },
      { min: 13.5e6, max: 80e6, step: 250_000 },
    ),
    horizontalMultiple: fc.constantFrom(1, 2, 8),
    maxLineTotal: fc.constantFrom(1023, 2047, 4095),
    maxFieldLines: fc.constantFrom(320, 700, 2047),
    interlace: fc.boolean(),
  },
  { requiredKeys: [] },
) satisfies fc.Arbitrary<DeviceTimingLimits>;

const screen = fc.constantFrom(wide, television, ...screenPresets.map(({ envelope }) => envelope));

/** Requests of every kind: most of them fit nowhere. */
export const anyRequest: fc.Arbitrary<FitRequest> = fc.record({
  wish,
  screen,
  device: fc.option(device, { nil: undefined }),
});
