import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { DeviceTimingLimits, RasterTiming } from "@/lib/timing/raster";

/** The figures of a raster that an owner can wish for or keep. */
export type FitFigure =
  | "activeLines"
  | "activePx"
  | "fieldRateHz"
  | "interlaced"
  | "lineRateHz"
  | "pixelClockHz"
  | "lineTotal"
  | "fieldLines";

/** What the owner wants. `activeLines` counts lines of the **frame** (480 for 480i); `fieldLines` whole lines of a field. */
export type FitWish = {
  readonly activeLines: number;
  readonly activePx: number;
  readonly fieldRateHz: number;
  readonly interlaced: boolean;
  readonly lineRateHz?: number | undefined;
  readonly pixelClockHz?: number | undefined;
  readonly lineTotal?: number | undefined;
  readonly fieldLines?: number | undefined;
};

export type FitRequest = {
  readonly wish: FitWish;
  readonly screen: ScreenEnvelope;
  readonly device?: DeviceTimingLimits | undefined;
  /** What the nearest rasters should not change, when nothing fits. */
  readonly keep?: readonly FitFigure[] | undefined;
  /** At most so many rasters in each list: 1 to 64, 8 by default. */
  readonly limit?: number | undefined;
};

/** A raster with its rates; `rateErrorHz` is its field rate less the wished one. */
export type FittedRaster = {
  readonly timing: RasterTiming;
  readonly lineRateHz: number;
  readonly fieldRateHz: number;
  readonly rateErrorHz: number;
  /** How far its porches are from the standard's: 0 is the standard. Only good for ranking. */
  readonly porchCost: number;
  /** The catalogue's id, where the raster is a published one. */
  readonly standard?: string | undefined;
  readonly notes: readonly string[];
};

/** Something that keeps a raster from fitting, by name; `standard-…` are the published spans, `wish-…` the owner's own. */
export type FitConstraint =
  | "screen-line-rate"
  | "screen-field-rate"
  | "screen-interlace"
  | "screen-clock"
  | "screen-sync"
  | "screen-back-porch"
  | "screen-field-blank"
  | "device-clock"
  | "device-clock-step"
  | "device-multiple"
  | "device-line-total"
  | "device-field-lines"
  | "device-interlace"
  | "device-parts"
  | "standard-line-blank"
  | "standard-field-blank"
  | "wish-line-rate"
  | "wish-clock"
  | "wish-line-total"
  | "wish-field-lines"
  | "wish-field-rate";

/** One binding constraint: without it a raster would fit, and this is what that one needs. */
export type FitBlock = {
  readonly constraint: FitConstraint;
  /** What the wish needs, and the limit that is in the way, in `unit`; absent where there is no figure to it. */
  readonly needed?: number | undefined;
  readonly limit?: number | undefined;
  readonly unit?: "Hz" | "µs" | "lines" | "clocks" | undefined;
  /** Only for the line rate: lines in all, those of them that are blanking, and the field rate at the limit. */
  readonly totalLines?: number | undefined;
  readonly blankLines?: number | undefined;
  readonly fieldRateAtLimitHz?: number | undefined;
  /** The fact in one sentence, with figures and units. */
  readonly sentence: string;
  /** False where it takes all constraints of the list together to make a raster fit. */
  readonly alone: boolean;
};

/** One figure that was given up. */
export type FigureChange = {
  readonly figure: FitFigure;
  readonly from: number | boolean;
  readonly to: number | boolean;
  readonly unit: "Hz" | "lines" | "px" | "clocks" | "";
  /** The owner wanted it kept. */
  readonly kept: boolean;
};

export type NearestRaster = FittedRaster & { readonly changed: readonly FigureChange[] };

/** `blockedBy` and `nearest` are empty where something fits. */
export type FitOutcome = {
  readonly fits: readonly FittedRaster[];
  readonly blockedBy: readonly FitBlock[];
  readonly nearest: readonly NearestRaster[];
};
