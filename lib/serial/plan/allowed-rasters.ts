import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { RasterTiming } from "@/lib/timing/raster";
import { fieldRateHz, lineRateHz } from "@/lib/timing/rates";
import { isRasterAllowed } from "@/lib/profile/check/allowed-raster";
import { isWholeRaster, sameOutput } from "./output-raster";

/** Says whether a raster may be out at any moment of a plan; null is nothing put out, which harms no screen. */
export type AllowedRasters = (raster: RasterTiming | null) => boolean;

/** How far beyond the rates before and after a raster may lie on an unknown screen. Source: the project's own rule. */
const UNKNOWN_SCREEN_MARGIN = 0.01;

function between(value: number, ends: readonly number[]): boolean {
  const min = Math.min(...ends) * (1 - UNKNOWN_SCREEN_MARGIN);
  const max = Math.max(...ends) * (1 + UNKNOWN_SCREEN_MARGIN);
  return value >= min && value <= max;
}

function ratesBetween(raster: RasterTiming, ends: readonly RasterTiming[]): boolean {
  if (ends.length === 0) return false;
  return between(lineRateHz(raster), ends.map(lineRateHz)) && between(fieldRateHz(raster), ends.map(fieldRateHz));
}

/**
 * The rasters that may be out while a device goes from one state to another, and back.
 *
 * Allowed is what has no stop of shape, screen or blanking; what is out at the start; with the screen unknown, what is
 * a raster at all and has its line and field rates between those before and after, ±1 %.
 */
export function allowedRasters(of: {
  readonly screen: ScreenEnvelope | "accepted-unknown";
  readonly before: RasterTiming | null;
  readonly after: RasterTiming | null;
}): AllowedRasters {
  const { screen, before, after } = of;
  const ends = [before, after].filter((raster): raster is RasterTiming => raster !== null && isWholeRaster(raster));
  return (raster) => {
    if (raster === null || sameOutput(raster, before)) return true;
    if (!isWholeRaster(raster)) return false;
    if (screen !== "accepted-unknown") return isRasterAllowed(raster, screen);
    return isRasterAllowed(raster, undefined) && ratesBetween(raster, ends);
  };
}
