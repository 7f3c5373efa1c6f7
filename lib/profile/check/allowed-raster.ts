import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { fitsEnvelope } from "@/lib/timing/judge-envelope";
import type { RasterTiming } from "@/lib/timing/raster";
import { rasterProblems } from "@/lib/timing/raster-problems";

/**
 * A raster that may be put out: no stop of `shape`, `screen` or `blanking`.
 *
 * With the screen unknown only its shape and its syncs are judged.
 */
export function isRasterAllowed(timing: RasterTiming, screen: ScreenEnvelope | undefined): boolean {
  if (rasterProblems(timing).length > 0) return false;
  if (timing.horizontal.sync === 0 || timing.vertical.sync === 0) return false;
  return screen === undefined || fitsEnvelope(timing, screen);
}
