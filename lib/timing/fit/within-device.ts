import type { FitConstraint } from "@/lib/timing/fit/fit-types";
import { inSpan } from "@/lib/timing/span";
import type { AxisTiming, DevicePartSpans, DeviceTimingLimits, RasterTiming } from "@/lib/timing/raster";
import { fieldLines, lineTotal } from "@/lib/timing/rates";

/** A clock is on the grid where it is within half a Hz of it: figures in MHz carry rounding. */
const ON_GRID_HZ = 0.5;

const parts = ["active", "frontPorch", "sync", "backPorch"] as const;

function partsInside(axis: AxisTiming, spans: DevicePartSpans | undefined): boolean {
  return parts.every((part) => {
    const span = spans?.[part];
    return span === undefined || (axis[part] >= span[0] && axis[part] <= span[1]);
  });
}

function onGrid(clockHz: number, clock: NonNullable<DeviceTimingLimits["clockHz"]>): boolean {
  const steps = Math.round((clockHz - clock.min) / clock.step);
  return Math.abs(clock.min + steps * clock.step - clockHz) <= ON_GRID_HZ;
}

/** The limits of a device that a raster breaks; empty where the device can put it out. What is unknown breaks nothing. */
export function brokenDeviceLimits(timing: RasterTiming, device: DeviceTimingLimits): FitConstraint[] {
  const { clockHz, horizontalMultiple: multiple = 1 } = device;
  const broken: [FitConstraint, boolean][] = [
    ["device-clock", clockHz !== undefined && !inSpan(timing.pixelClockHz, [clockHz.min, clockHz.max])],
    [
      "device-clock-step",
      clockHz !== undefined && device.outputClock !== "input" && !onGrid(timing.pixelClockHz, clockHz),
    ],
    ["device-multiple", parts.some((part) => timing.horizontal[part] % multiple !== 0)],
    ["device-line-total", lineTotal(timing) > (device.maxLineTotal ?? Infinity)],
    ["device-field-lines", fieldLines(timing) > (device.maxFieldLines ?? Infinity)],
    ["device-interlace", timing.interlaced && device.interlace === false],
    [
      "device-parts",
      !partsInside(timing.horizontal, device.horizontal) || !partsInside(timing.vertical, device.vertical),
    ],
  ];
  return broken.flatMap(([constraint, isBroken]) => (isBroken ? [constraint] : []));
}
