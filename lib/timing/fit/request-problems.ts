import type { PathMessage } from "@/lib/result";
import { envelopeProblems } from "@/lib/timing/envelope-problems";
import type { FitRequest, FitWish } from "@/lib/timing/fit/fit-types";
import { MAX_FIELD_LINES, MAX_LINE_TOTAL } from "@/lib/timing/fit/search-space";
import type { DeviceTimingLimits } from "@/lib/timing/raster";

/** At most so many rasters a list. */
export const MAX_FITS = 64;

/** Fewer lines or px are no picture, and make a search that has no end. */
const MIN_PICTURE = 16;

type Range = readonly [min: number, max: number];

function numberProblem(path: string, value: number | undefined, [min, max]: Range, whole: boolean): PathMessage[] {
  if (value === undefined) return [];
  const good = Number.isFinite(value) && value >= min && value <= max && (!whole || Number.isInteger(value));
  return good ? [] : [{ path, message: `Must be a ${whole ? "whole " : ""}number from ${min} to ${max}.` }];
}

function wishProblems(wish: FitWish): PathMessage[] {
  const odd = wish.interlaced && wish.activeLines % 2 !== 0;
  return [
    ...numberProblem("activeLines", wish.activeLines, [MIN_PICTURE, MAX_FIELD_LINES], true),
    ...(odd ? [{ path: "activeLines", message: "An interlaced frame has an even number of picture lines." }] : []),
    ...numberProblem("activePx", wish.activePx, [MIN_PICTURE, MAX_LINE_TOTAL], true),
    ...numberProblem("fieldRateHz", wish.fieldRateHz, [1, 1000], false),
    ...numberProblem("lineRateHz", wish.lineRateHz, [100, 1e7], false),
    ...numberProblem("pixelClockHz", wish.pixelClockHz, [1e4, 2e10], false),
    ...numberProblem("lineTotal", wish.lineTotal, [2, MAX_LINE_TOTAL], true),
    ...numberProblem("fieldLines", wish.fieldLines, [2, MAX_FIELD_LINES], true),
  ];
}

function deviceProblems(device: DeviceTimingLimits): PathMessage[] {
  const clock = device.clockHz;
  const crossed = clock !== undefined && clock.min > clock.max;
  return [
    ...numberProblem("device.clockHz.min", clock?.min, [0, 2e10], false),
    ...numberProblem("device.clockHz.max", clock?.max, [1, 2e10], false),
    ...numberProblem("device.clockHz.step", clock?.step, [1e-3, 2e10], false),
    ...(crossed ? [{ path: "device.clockHz", message: "The lower end is above the upper one." }] : []),
    ...numberProblem("device.horizontalMultiple", device.horizontalMultiple, [1, 256], true),
    ...numberProblem("device.maxLineTotal", device.maxLineTotal, [1, 1e6], true),
    ...numberProblem("device.maxFieldLines", device.maxFieldLines, [1, 1e6], true),
  ];
}

/** What keeps a request from being answered; empty for every request that `fitRaster` searches. */
export function requestProblems(request: FitRequest): PathMessage[] {
  const screen = envelopeProblems(request.screen).map(({ path, message }) => ({ path: `screen.${path}`, message }));
  return [
    ...wishProblems(request.wish),
    ...screen,
    ...(request.device === undefined ? [] : deviceProblems(request.device)),
    ...numberProblem("limit", request.limit, [1, MAX_FITS], true),
  ];
}
