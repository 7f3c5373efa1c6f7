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

function noStepFinding(device: DeviceLimits): Finding {
  return {
    rule: "device.step",
    path: "device.numbers",
    severity: "stop",
    sentence: `${device.name} has no step for any of the rasters that fit; those of another width or count of lines may have one.`,
    limitSource: "driver",
    slots: [],
    remedies: [],
  };
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
    const held = ({ timing }: FittedRaster) => isHeld(timing, request);
    const fits = result.value.fits.filter(held);
    nearest = result.value.nearest.filter(held);
    if (fits.length > 0) return ok({ fits, blockedBy: [], nearest: [] });
    if (result.value.blockedBy.length > 0) {
      const blockedBy = fitFindings(asked, { ...result.value, nearest });
      return ok({ fits, blockedBy, nearest });
    }
  }
  return ok({ fits: [], blockedBy: device === undefined ? [] : [noStepFinding(device)], nearest });
}
