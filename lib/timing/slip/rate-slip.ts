import { fieldRateHz } from "@/lib/timing/rates";
import type { RasterTiming } from "@/lib/timing/raster";

/** What two rates that are not the same do to the frames between them. */
export type RateSlip = {
  /** `repeats`: more frames leave than arrive. `drops`: fewer. */
  readonly kind: "none" | "repeats" | "drops";
  /** Out less in. */
  readonly differenceHz: number;
  /** A frame is repeated or dropped every so many seconds; absent where there is none. */
  readonly everyS?: number | undefined;
  /** The same for the ends of a source rate that is only known roughly; `Infinity` where it may be none. */
  readonly everyRangeS?: readonly [shortest: number, longest: number] | undefined;
};

/** Rates that differ by less slip once in a day at the most: that is no slip. */
const NO_SLIP_HZ = 1 / 86_400;

/**
 * The slip between the rate that arrives and the one that leaves: one frame every 1 / difference seconds.
 *
 * @param uncertaintyHz how far the source's rate may be from `inHz`; gives `everyRangeS`
 */
export function rateSlip(inHz: number, outHz: number, uncertaintyHz = 0): RateSlip {
  const differenceHz = outHz - inHz;
  const size = Math.abs(differenceHz);
  const range =
    uncertaintyHz > 0
      ? {
          everyRangeS: [
            1 / (size + uncertaintyHz),
            size > uncertaintyHz ? 1 / (size - uncertaintyHz) : Infinity,
          ] as const,
        }
      : {};
  if (size < NO_SLIP_HZ) return { kind: "none", differenceHz, ...range };
  return { kind: differenceHz > 0 ? "repeats" : "drops", differenceHz, everyS: 1 / size, ...range };
}

/**
 * The raster that comes out of a device whose clock follows the input: the same counts at the source's field rate.
 *
 * Its line rate and clock change in proportion, so it is this raster that has to be checked against the screen.
 * @param inHz field rate of what arrives
 */
export function followInput(timing: RasterTiming, inHz: number): RasterTiming {
  return { ...timing, pixelClockHz: (timing.pixelClockHz * inHz) / fieldRateHz(timing) };
}
