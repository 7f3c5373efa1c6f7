import type { DevicePartSpans, DeviceTimingLimits } from "@/lib/timing/raster";
import type { DeviceLimits, NumberLimit } from "@/lib/profile/limits";
import { numberLimit, stepCount, valueOfStep } from "@/lib/profile/round";

const parts = ["active", "frontPorch", "sync", "backPorch"] as const;

/** The most that a fit takes as a multiple: a part that steps by more is left to the rounding that comes after. */
const MAX_MULTIPLE = 256;

function greatestCommonDivisor(a: number, b: number): number {
  // Euclid: at most a few dozen rounds for numbers up to 2^31.
  return b === 0 ? a : greatestCommonDivisor(b, a % b);
}

/** Steps of a part that all lie on multiples of the step, so that a common multiple can stand for them. */
function isMultiple({ min, step }: NumberLimit): boolean {
  return Number.isInteger(step) && step > 0 && min % step === 0;
}

/** Horizontal figures are multiples of what the device counts in, and of the steps of each part. */
function horizontalMultiple(device: DeviceLimits): number {
  const steps = parts.flatMap((part) => {
    const limit = numberLimit(device, `modes[*].timing.horizontal.${part}`);
    return limit !== undefined && isMultiple(limit) ? [limit.step] : [];
  });
  const common = steps.reduce(
    (multiple, step) => (multiple * step) / greatestCommonDivisor(multiple, step),
    device.horizontalMultiple,
  );
  return common <= MAX_MULTIPLE ? common : device.horizontalMultiple;
}

function partSpans(device: DeviceLimits, axis: "horizontal" | "vertical"): DevicePartSpans {
  const spans = parts.flatMap((part) => {
    const limit = numberLimit(device, `modes[*].timing.${axis}.${part}`);
    return limit === undefined ? [] : [[part, [limit.min, valueOfStep(limit, stepCount(limit))]] as const];
  });
  return Object.fromEntries(spans);
}

/**
 * A device's limits as the fitting engine takes them: clock, multiples, totals, and the ends of each part.
 *
 * Steps of a part that are no multiples (2, 5, 8, …), and steps of vertical parts, have no word there: hold what was
 * fitted against `roundTiming` before it is used.
 */
export function fitLimits(device: DeviceLimits): DeviceTimingLimits {
  const clock = numberLimit(device, "modes[*].timing.pixelClockHz");
  const { maxLineTotal, maxFieldLines, interlace, outputClock } = device;
  return {
    // A driver without a word for the clock says 0 to 0: nothing is known of it.
    clockHz: clock === undefined || clock.max <= 0 ? undefined : { min: clock.min, max: clock.max, step: clock.step },
    horizontalMultiple: horizontalMultiple(device),
    maxLineTotal,
    maxFieldLines,
    interlace,
    horizontal: partSpans(device, "horizontal"),
    vertical: partSpans(device, "vertical"),
    outputClock,
  };
}
