import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { brokenDeviceLimits } from "@/lib/timing/fit/within-device";
import { fitsEnvelope } from "@/lib/timing/judge-envelope";
import type { DeviceTimingLimits, RasterTiming } from "@/lib/timing/raster";
import { rasterProblems } from "@/lib/timing/raster-problems";
import { fieldRateHz, frameLines, lineTotal } from "@/lib/timing/rates";
import { rateSlip, type RateSlip } from "@/lib/timing/slip/rate-slip";

/** One way to bring the rates nearer together. */
export type SlipCure = {
  readonly timing: RasterTiming;
  readonly fieldRateHz: number;
  /** Clocks added to the back porch of each line; negative where taken. */
  readonly clocksAdded: number;
  readonly clockChangeHz: number;
  readonly slip: RateSlip;
};

export type SlipCures = {
  readonly now: RateSlip;
  /** The clock that would close it with the counts as they are, whatever the device can do. */
  readonly exactClockHz: number;
  /** Best first; only what is nearer than now. */
  readonly cures: readonly SlipCure[];
};

/** Clocks a line is made longer or shorter by at most: two µs at 27 MHz, which no set's centring notices as a jump. */
const MAX_CLOCKS_MOVED = 54;

/** Cures given at most. */
const MAX_CURES = 5;

function withClocks(timing: RasterTiming, clocksAdded: number, pixelClockHz: number): RasterTiming {
  const { horizontal } = timing;
  return { ...timing, pixelClockHz, horizontal: { ...horizontal, backPorch: horizontal.backPorch + clocksAdded } };
}

/** The grid's clocks on either side of a wished one, within its range; the wished one itself where there is no grid. */
function gridClocks(wishedHz: number, clock: DeviceTimingLimits["clockHz"]): number[] {
  if (clock === undefined) return [Math.round(wishedHz)];
  const step = Math.floor((wishedHz - clock.min) / clock.step);
  const both = [step, step + 1].map((count) => clock.min + count * clock.step);
  return both.filter((hz) => hz >= clock.min && hz <= clock.max);
}

/**
 * Clocks and line totals that bring a raster's field rate nearer to the one that arrives, as far as the device's clock
 * steps and the screen allow; fields keep their lines.
 *
 * On a device whose output follows the input there is nothing to cure: `now` is none and the list is empty.
 * @param timing without `rasterProblems`
 * @param inHz field rate of what arrives
 */
export function closeSlip(
  timing: RasterTiming,
  inHz: number,
  device: DeviceTimingLimits,
  screen?: ScreenEnvelope,
): SlipCures {
  const fields = timing.interlaced ? 2 : 1;
  const clockFor = (total: number) => (inHz * total * frameLines(timing)) / fields;
  const exactClockHz = clockFor(lineTotal(timing));
  if (device.outputClock === "input") return { now: rateSlip(inHz, inHz), exactClockHz, cures: [] };
  const now = rateSlip(inHz, fieldRateHz(timing));
  const multiple = device.horizontalMultiple ?? 1;
  const moves = Math.floor(MAX_CLOCKS_MOVED / multiple);
  const cures = Array.from({ length: 2 * moves + 1 }, (_, index) => (index - moves) * multiple).flatMap((clocksAdded) =>
    gridClocks(clockFor(lineTotal(timing) + clocksAdded), device.clockHz).map((pixelClockHz): SlipCure => {
      const cured = withClocks(timing, clocksAdded, pixelClockHz);
      const rate = fieldRateHz(cured);
      const clockChangeHz = pixelClockHz - timing.pixelClockHz;
      return { timing: cured, fieldRateHz: rate, clocksAdded, clockChangeHz, slip: rateSlip(inHz, rate) };
    }),
  );
  const size = (slip: RateSlip) => (slip.kind === "none" ? 0 : Math.abs(slip.differenceHz));
  const possible = cures.filter(
    (cure) =>
      size(cure.slip) < size(now) &&
      rasterProblems(cure.timing).length === 0 &&
      brokenDeviceLimits(cure.timing, device).length === 0 &&
      (screen === undefined || fitsEnvelope(cure.timing, screen)),
  );
  const sorted = possible.sort(
    (a, b) => size(a.slip) - size(b.slip) || Math.abs(a.clocksAdded) - Math.abs(b.clocksAdded),
  );
  return { now, exactClockHz, cures: sorted.slice(0, MAX_CURES) };
}
