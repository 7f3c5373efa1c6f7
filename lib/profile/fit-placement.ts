import { placeExtent, cutOff } from "@/lib/picture/effective-picture";
import type { NumberLimit } from "./limits";
import { isInRange, nearestStep, roundToStep, stepCount, valueOfStep } from "./round";

/** Tenths of a percent and whole px or lines, where no device says otherwise. */
const FREE_PCT: NumberLimit = { min: 0, max: 200, step: 0.1, unit: "%" };
const FREE_OFFSET: NumberLimit = { min: -65_535, max: 65_535, step: 1 };

/** More steps than any setting has; keeps a search by halving finite whatever a stranger's limits say. */
export const MAX_STEPS = 2 ** 40;

/** A stretch of the active raster, ends as counts from its start: all of it, or what a frame leaves visible. */
export type Window = { readonly from: number; readonly to: number };

function isInside(active: number, sizePct: number, offset: number, window: Window): boolean {
  const { first, size } = placeExtent(active, sizePct, offset);
  return size > 0 && first >= window.from && first + size <= window.to;
}

/**
 * The largest size in % that lies inside a window at an offset, on the device's steps; null when none does.
 *
 * An extent grows at both ends as its size does, so the last step that fits is found by halving (bound: 40 probes).
 */
export function largestPctInside(
  active: number,
  offset: number,
  window: Window,
  limit: NumberLimit = FREE_PCT,
): number | null {
  const fits = (step: number) => {
    const { first, size } = placeExtent(active, valueOfStep(limit, step), offset);
    return first >= window.from && first + size <= window.to;
  };
  let [low, high] = [0, Math.min(stepCount(limit), MAX_STEPS)];
  if (!fits(low)) return null;
  while (low < high) {
    const middle = Math.ceil((low + high) / 2);
    if (fits(middle)) low = middle;
    else high = middle - 1;
  }
  const pct = valueOfStep(limit, low);
  return isInside(active, pct, offset, window) ? pct : null;
}

/** The offset nearest to `offset` at which a size lies inside a window, on the device's steps; null when none does. */
export function nearestOffsetInside(
  active: number,
  sizePct: number,
  offset: number,
  window: Window,
  limit: NumberLimit = FREE_OFFSET,
): number | null {
  const { first, size } = placeExtent(active, sizePct, offset);
  const centred = first - offset;
  const [least, most] = [window.from - centred, window.to - size - centred];
  if (size <= 0 || least > most) return null;
  const nearest = Math.min(Math.max(offset, least), most);
  // The step may lie just outside, on either side.
  const around = [0, 1, -1].map((by) => valueOfStep(limit, nearestStep(nearest, limit) + by));
  const fitting = around.filter(
    (value) => isInRange(roundToStep(value, limit), limit) && isInside(active, sizePct, value, window),
  );
  return fitting[0] ?? null;
}

/** How much lies outside a raster, before and after it; `size` is that of the whole picture. */
export function outsideRaster(
  active: number,
  sizePct: number,
  offset: number,
): { readonly before: number; readonly after: number; readonly size: number } {
  const extent = placeExtent(active, sizePct, offset);
  return { ...cutOff(active, extent), size: extent.size };
}
