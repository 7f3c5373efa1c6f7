import type { DeviceTimingLimits, RasterTiming } from "@/lib/timing/raster";
import { fieldRateHz, frameLines, lineRateHz, lineTotal } from "@/lib/timing/rates";

/** What the finest changes of a raster do to its rates, and what would meet a field rate exactly. */
export type ClockSteps = {
  /** Clocks by which a line of this device grows at least. */
  readonly clocks: number;
  /** How much slower one step of the line's length makes the line and the field rate. */
  readonly lineStepHz: number;
  readonly fieldStepHz: number;
  /** The clock that meets the field rate with these totals. */
  readonly exactClockHz: number;
  /** The device's clock step; absent where the clock is free or nothing is known of it. */
  readonly clockStepHz?: number | undefined;
  /** The nearest clock that the device has, and the field rate that it gives. */
  readonly nearestClockHz: number;
  readonly nearestFieldHz: number;
};

/** Nearer than this the clock is exact: a crystal is off by more. */
const SAME_CLOCK_HZ = 0.5;

function nearestOnGrid(clockHz: number, device: DeviceTimingLimits): number {
  const grid = device.outputClock === "input" ? undefined : device.clockHz;
  if (grid === undefined) return Math.round(clockHz);
  const last = Math.floor((grid.max - grid.min) / grid.step);
  const steps = Math.min(last, Math.max(0, Math.round((clockHz - grid.min) / grid.step)));
  return grid.min + steps * grid.step;
}

/**
 * What one clock more in a line does, and the clock that would meet a field rate with the counts as they are.
 *
 * @param timing without `rasterProblems`
 * @param wishedHz the field rate to meet
 */
export function clockSteps(timing: RasterTiming, wishedHz: number, device: DeviceTimingLimits = {}): ClockSteps {
  const clocks = device.horizontalMultiple ?? 1;
  const total = lineTotal(timing);
  const slower = total / (total + clocks);
  const fields = timing.interlaced ? 2 : 1;
  const exactClockHz = (wishedHz * total * frameLines(timing)) / fields;
  const nearestClockHz = nearestOnGrid(exactClockHz, device);
  return {
    clocks,
    lineStepHz: lineRateHz(timing) * (1 - slower),
    fieldStepHz: fieldRateHz(timing) * (1 - slower),
    exactClockHz,
    clockStepHz: device.outputClock === "input" ? undefined : device.clockHz?.step,
    nearestClockHz,
    nearestFieldHz: fieldRateHz({ ...timing, pixelClockHz: nearestClockHz }),
  };
}

/** The clock that meets the rate is one that the device has. */
export function isExact(steps: ClockSteps): boolean {
  return Math.abs(steps.exactClockHz - steps.nearestClockHz) <= SAME_CLOCK_HZ;
}
