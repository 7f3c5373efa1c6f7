import type { FitRequest } from "@/lib/timing/fit/fit-types";
import { closeRasters } from "@/lib/timing/fit/nearest";
import { requestProblems } from "@/lib/timing/fit/request-problems";
import type { RasterTiming } from "@/lib/timing/raster";

/** What a check can spare for one mode: a sane request takes a few hundred. */
const CLOSEST_TRIES = 400;

/**
 * Rasters that come closest to a wish and fit, best first. For a check, which is made at each key: fewer tries than
 * `fitRaster`, and no reasons. Empty for a request with `requestProblems`, and where nothing is near.
 */
export function closestRasters(request: FitRequest): RasterTiming[] {
  return requestProblems(request).length > 0 ? [] : closeRasters(request, { left: CLOSEST_TRIES });
}
