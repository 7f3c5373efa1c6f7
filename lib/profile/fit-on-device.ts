import { ok, type PathMessage, type Result } from "@/lib/result";
import { fitRaster } from "@/lib/timing/fit/fit-raster";
import type { FitRequest, FittedRaster, NearestRaster } from "@/lib/timing/fit/fit-types";
import { fitsEnvelope } from "@/lib/timing/judge-envelope";
import type { RasterTiming } from "@/lib/timing/raster";
import { sameCounts, sameRaster } from "@/lib/timing/same-raster";
import type { Finding } from "@/lib/profile/finding";
import { fitFindings } from "@/lib/profile/fit-findings";
import { fitLimits } from "@/lib/profile/fit-limits";
import type { DeviceLimits } from "@/lib/profile/limits";
import { roundTiming } from "@/lib/profile/round";

/** What `fitRaster` takes, with a device as the checks know it. */
export type DeviceFitRequest = Omit<FitRequest, "device"> & { readonly device?: DeviceLimits | undefined };

/** `blockedBy` and `nearest` are empty where something fits. */
export type DeviceFitOutcome = {
  readonly fits: readonly FittedRaster[];
  readonly blockedBy: readonly Finding[];
  readonly nearest: readonly NearestRaster[];
};

/** Whether the device holds a raster as it is; a clock that follows its source is stored on the steps, and fits there too. */
function isHeld(timing: RasterTiming, { screen, device }: DeviceFitRequest): boolean {
  if (device === undefined) return true;
  const stored = roundTiming(timing, device);
  if (device.outputClock === "free") return sameRaster(stored, timing);
  return sameCounts(stored, timing) && fitsEnvelope(stored, screen);
}

function finding(rule: string, path: string, sentence: string, limitSource: string): Finding {
  return { rule, path, severity: "stop", sentence, limitSource, slots: [], remedies: [] };
}

/** Nothing was found to be in the way, and nothing fits: no single limit, nor all of them, can be named. */
const nothingFinding = finding(
  "wish.impossible",
  "activeLines",
  "No raster was found for this, whatever the screen and the device would take: ask for fewer px or lines, or another rate.",
  "search",
);

function noStepFinding(device: DeviceLimits): Finding {
  const sentence = `${device.name} has no step for any of the rasters that fit; those of another width or count of lines may have one.`;
  return finding("device.step", "device.numbers", sentence, "driver");
}

/**
 * Rasters that meet a wish on a screen and a device, as the device holds them; or why there is none, and the nearest.
 *
 * Where the output follows the input the clock is the source's, so a raster counts as fitting when it does at the rate
 * that was wished and also as the device stores it.
 * Errors: as `fitRaster`, what is wrong with the request by path.
 */
export function fitOnDevice(request: DeviceFitRequest): Result<DeviceFitOutcome, PathMessage[]> {
  const { device } = request;
  const limits = device && fitLimits(device);
  // A clock that follows its source is tried first; where what it gives cannot be stored, one on the device's steps.
  const clocks = limits?.outputClock === "input" ? (["input", "free"] as const) : (["free"] as const);
  let nearest: readonly NearestRaster[] = [];
  for (const outputClock of clocks) {
    const asked: FitRequest = { ...request, device: limits && { ...limits, outputClock } };
    const result = fitRaster(asked);
    if (!result.ok) return result;
    const { fits, ...why } = result.value;
    const held = fits.filter(({ timing }) => isHeld(timing, request));
    nearest = why.nearest.filter(({ timing }) => isHeld(timing, request));
    if (held.length > 0) return ok({ fits: held, blockedBy: [], nearest: [] });
    if (fits.length === 0) {
      const blockedBy = fitFindings(asked, { fits, ...why, nearest });
      return ok({ fits: [], blockedBy: blockedBy.length > 0 ? blockedBy : [nothingFinding], nearest });
    }
  }
  return ok({ fits: [], blockedBy: device === undefined ? [] : [noStepFinding(device)], nearest });
}
