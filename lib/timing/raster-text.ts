import { rasterProblems } from "@/lib/timing/raster-problems";
import type { AxisTiming, Polarity, RasterTiming } from "@/lib/timing/raster";

/** Longer text is no raster: a clock and eight counts of five digits take some 70 characters. */
export const MAX_RASTER_TEXT = 100;

const PATTERN =
  /^(\d{1,5}(?:\.\d{1,6})?)_(\d{1,5})\.(\d{1,5})\.(\d{1,5})\.(\d{1,5})_(\d{1,5})\.(\d{1,5})\.(\d{1,5})\.(\d{1,5})_([pie])([np])([np])$/u;

const axisText = ({ active, frontPorch, sync, backPorch }: AxisTiming) =>
  [active, frontPorch, sync, backPorch].join(".");
const sign = (polarity: Polarity) => (polarity === "positive" ? "p" : "n");

/**
 * A raster as one word of an address: `27_1440.38.124.114_240.4.3.15_pnn`.
 *
 * Clock in MHz to the Hz; picture, front porch, sync and back porch across (clocks) and down (lines of a field); the scan
 * (`p`, `i`, or `e` for equal fields) with the polarities across and down. Ours, not a format of anybody else's.
 * @param timing without `rasterProblems`; a fraction of a Hz is rounded
 */
export function rasterToText(timing: RasterTiming): string {
  const clock = (timing.pixelClockHz / 1e6).toFixed(6).replace(/\.?0+$/u, "");
  const scan = timing.interlaced ? (timing.equalFields === true ? "e" : "i") : "p";
  const signs = sign(timing.horizontal.polarity) + sign(timing.vertical.polarity);
  return [clock, axisText(timing.horizontal), axisText(timing.vertical), scan + signs].join("_");
}

/** Reads what `rasterToText` wrote; undefined for anything else, and for what is no raster. */
export function rasterFromText(text: string): RasterTiming | undefined {
  const match = text.length > MAX_RASTER_TEXT ? null : PATTERN.exec(text);
  if (match === null) return undefined;
  const numbers = match.slice(1, 10).map(Number);
  const polarity = (letter: string | undefined): Polarity => (letter === "p" ? "positive" : "negative");
  const axis = (from: number, letter: string | undefined): AxisTiming => {
    const [active = 0, frontPorch = 0, sync = 0, backPorch = 0] = numbers.slice(from, from + 4);
    return { active, frontPorch, sync, backPorch, polarity: polarity(letter) };
  };
  const [scan, across, down] = match.slice(10);
  const timing: RasterTiming = {
    pixelClockHz: Math.round((numbers[0] ?? 0) * 1e6),
    interlaced: scan !== "p",
    ...(scan === "e" ? { equalFields: true } : {}),
    horizontal: axis(1, across),
    vertical: axis(5, down),
  };
  return rasterProblems(timing).length === 0 ? timing : undefined;
}
