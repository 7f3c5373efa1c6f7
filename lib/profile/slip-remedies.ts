import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { RasterTiming } from "@/lib/timing/raster";
import { lineTotal } from "@/lib/timing/rates";
import { closeSlip, type SlipCure } from "@/lib/timing/slip/close-slip";
import type { RateSlip } from "@/lib/timing/slip/rate-slip";
import type { Remedy } from "./finding";
import { fitLimits } from "./fit-limits";
import type { DeviceLimits } from "./limits";
import { modePath } from "./paths";
import { withUnit } from "./words";

/** Cures offered at most. */
const MAX_CURES = 2;

/** "18 s", "17 minutes", "5 hours" */
export function intervalText(seconds: number): string {
  if (seconds < 10) return withUnit(seconds, "s", seconds < 1 ? 2 : 1);
  if (seconds < 120) return withUnit(seconds, "s", 0);
  return seconds < 7200 ? withUnit(seconds / 60, "minutes", 0) : withUnit(seconds / 3600, "hours", 0);
}

/** "repeats every 18 s", "drops every 52 s", or that there is none. */
export function slipText(slip: RateSlip): string {
  return slip.everyS === undefined ? "none" : `${slip.kind} every ${intervalText(slip.everyS)}`;
}

function remedyOf(key: string, { timing, slip }: SlipCure): Remedy {
  const how = `${withUnit(timing.pixelClockHz / 1e6, "MHz")}, ${withUnit(lineTotal(timing), "clocks")}`;
  return {
    kind: "set",
    label: `Use ${how}: ${slipText(slip)}`,
    patch: [
      { path: modePath(key, "timing.pixelClockHz"), value: timing.pixelClockHz },
      { path: modePath(key, "timing.horizontal.backPorch"), value: timing.horizontal.backPorch },
    ],
  };
}

/**
 * Clocks that bring a mode's field rate nearer to what arrives, as far as the device's steps and the screen allow, best
 * first: as remedies that set the mode of that key.
 * @param timing the mode's raster, without `rasterProblems`
 * @param inHz field rate of what arrives
 */
export function slipRemedies(
  key: string,
  timing: RasterTiming,
  inHz: number,
  { device, screen }: { readonly device?: DeviceLimits | undefined; readonly screen?: ScreenEnvelope | undefined },
): Remedy[] {
  const { cures } = closeSlip(timing, inHz, device === undefined ? {} : fitLimits(device), screen);
  return cures.slice(0, MAX_CURES).map((cure) => remedyOf(key, cure));
}
