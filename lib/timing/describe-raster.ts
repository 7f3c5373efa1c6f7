import type { RasterTiming } from "@/lib/timing/raster";
import {
  fieldLines,
  fieldRateHz,
  frameLines,
  horizontalUs,
  lineRateHz,
  lineTotal,
  type AxisParts,
} from "@/lib/timing/rates";

/** The figures that follow from a raster. `verticalLines` counts lines per field. */
export type RasterFigures = {
  readonly lineTotal: number;
  readonly fieldLines: number;
  readonly frameLines: number;
  readonly lineRateHz: number;
  readonly fieldRateHz: number;
  readonly horizontalUs: AxisParts;
  readonly verticalLines: AxisParts;
};

/** Totals, rates, and the parts in µs and lines. The timing must have no `rasterProblems`. */
export function describeRaster(timing: RasterTiming): RasterFigures {
  const { active, frontPorch, sync, backPorch } = timing.vertical;
  return {
    lineTotal: lineTotal(timing),
    fieldLines: fieldLines(timing),
    frameLines: frameLines(timing),
    lineRateHz: lineRateHz(timing),
    fieldRateHz: fieldRateHz(timing),
    horizontalUs: horizontalUs(timing),
    verticalLines: { active, frontPorch, sync, backPorch },
  };
}
