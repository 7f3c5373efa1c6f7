import type { PathMessage } from "@/lib/result";
import type { AxisTiming, RasterTiming } from "@/lib/timing/raster";

/** Beyond any figure of a published raster (10 240 px and 10 GHz are the largest), and safe to multiply. */
export const MAX_AXIS_COUNT = 65_535;
export const MAX_PIXEL_CLOCK_HZ = 20e9;

const parts = ["active", "frontPorch", "sync", "backPorch"] as const;

function axisProblems(name: "horizontal" | "vertical", axis: AxisTiming): PathMessage[] {
  const unit = name === "horizontal" ? "clocks" : "lines";
  return parts.flatMap((part) => {
    const value = axis[part];
    const least = part === "active" ? 1 : 0;
    if (Number.isInteger(value) && value >= least && value <= MAX_AXIS_COUNT) return [];
    return [
      { path: `${name}.${part}`, message: `Must be a whole number of ${unit} from ${least} to ${MAX_AXIS_COUNT}.` },
    ];
  });
}

/**
 * What keeps a timing from being a raster at all: fractions, signs, sizes beyond any use, contradictions.
 *
 * Empty when every function of `rates.ts` gives a finite figure for it. A sync of 0 is a raster that no screen
 * locks to; `judgeBlanking` says so, not this.
 */
export function rasterProblems(timing: RasterTiming): PathMessage[] {
  const problems = [...axisProblems("horizontal", timing.horizontal), ...axisProblems("vertical", timing.vertical)];
  const clock = timing.pixelClockHz;
  if (!Number.isFinite(clock) || clock <= 0 || clock > MAX_PIXEL_CLOCK_HZ) {
    problems.push({ path: "pixelClockHz", message: "Must be a number of Hz above 0, and 20 GHz at most." });
  }
  if (timing.equalFields === true && !timing.interlaced) {
    problems.push({ path: "equalFields", message: "Only an interlaced raster has two fields to be equal." });
  }
  return problems;
}
