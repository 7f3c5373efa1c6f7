import type { FitFigure } from "@/lib/timing/fit/fit-types";
import type { RasterTiming } from "@/lib/timing/raster";
import { fieldLines, fieldRateHz, lineRateHz, lineTotal } from "@/lib/timing/rates";

export type BlankPart = "frontPorch" | "sync" | "backPorch";

/** What can be typed or dragged: the figures of a wish, but for the scan, and the porches. */
export type EditFigure = Exclude<FitFigure, "interlaced"> | `${"horizontal" | "vertical"}.${BlankPart}`;

/** All figures of a raster that can be edited. */
export function editableFigures(timing: RasterTiming): Readonly<Record<EditFigure, number>> {
  const { horizontal, vertical } = timing;
  return {
    activeLines: vertical.active,
    activePx: horizontal.active,
    fieldRateHz: fieldRateHz(timing),
    lineRateHz: lineRateHz(timing),
    pixelClockHz: timing.pixelClockHz,
    lineTotal: lineTotal(timing),
    fieldLines: fieldLines(timing),
    "horizontal.frontPorch": horizontal.frontPorch,
    "horizontal.sync": horizontal.sync,
    "horizontal.backPorch": horizontal.backPorch,
    "vertical.frontPorch": vertical.frontPorch,
    "vertical.sync": vertical.sync,
    "vertical.backPorch": vertical.backPorch,
  };
}
