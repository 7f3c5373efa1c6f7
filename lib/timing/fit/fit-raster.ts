import { fail, ok, type PathMessage, type Result } from "@/lib/result";
import { catalogue } from "@/lib/timing/catalogue/catalogue";
import { SEARCH_TRIES } from "@/lib/timing/fit/budget";
import { blockedBy } from "@/lib/timing/fit/blocked-by";
import type { FitOutcome, FitRequest, FittedRaster } from "@/lib/timing/fit/fit-types";
import { fittedRaster } from "@/lib/timing/fit/fitted-raster";
import { changesOf, nearestRasters } from "@/lib/timing/fit/nearest";
import { requestProblems } from "@/lib/timing/fit/request-problems";
import { compareFound, search, type Found } from "@/lib/timing/fit/search";
import { searchSpace } from "@/lib/timing/fit/search-space";
import { brokenDeviceLimits } from "@/lib/timing/fit/within-device";
import { fitsEnvelope } from "@/lib/timing/judge-envelope";
import { fieldRateHz } from "@/lib/timing/rates";
import { sameRaster } from "@/lib/timing/same-raster";

const DEFAULT_LIMIT = 8;

/** Published rasters that meet the wish as they are; their porches are the standard's by definition. */
function publishedFits({ wish, screen, device = {} }: FitRequest): Found[] {
  const fitting = catalogue.filter(
    ({ timing }) =>
      changesOf(wish, timing).length === 0 &&
      fitsEnvelope(timing, screen) &&
      brokenDeviceLimits(timing, device).length === 0,
  );
  const timings = fitting.map(({ timing }) => timing);
  return timings
    .filter((timing, index) => timings.findIndex((other) => sameRaster(other, timing)) === index)
    .map((timing) => {
      const field = fieldRateHz(timing);
      return { timing, fieldRateHz: field, rateErrorHz: field - wish.fieldRateHz, porchCost: 0 };
    });
}

/**
 * Rasters that meet a wish within a screen's envelope and a device's limits, best first; or, where there is none, what
 * is in the way and the nearest rasters that do fit.
 *
 * Ranked by rate error in steps of 0.001 Hz, then by porches nearest the standard's: for each count of field lines the
 * best raster, and the published ones as they are.
 * Errors: what is wrong with the request, by path; or that it takes more tries than there are (no path).
 */
export function fitRaster(request: FitRequest): Result<FitOutcome, PathMessage[]> {
  const problems = requestProblems(request);
  if (problems.length > 0) return fail(problems);
  const limit = request.limit ?? DEFAULT_LIMIT;
  const budget = { left: SEARCH_TRIES };
  const searched = search(searchSpace(request), budget);
  const published = publishedFits(request).filter(
    ({ timing }) => !searched.some((found) => sameRaster(found.timing, timing)),
  );
  const found = [...searched, ...published].sort(compareFound).slice(0, limit);
  if (found.length === 0 && budget.left < 0) {
    return fail([{ path: "", message: "There is too much to try: state fewer bands, or a line total or clock." }]);
  }
  if (found.length === 0) {
    return ok({ fits: [], blockedBy: blockedBy(request), nearest: nearestRasters(request, limit) });
  }
  const answer = ({ timing, porchCost }: Found): FittedRaster =>
    fittedRaster(timing, request.wish.fieldRateHz, request.screen, porchCost);
  return ok({ fits: found.map(answer), blockedBy: [], nearest: [] });
}
