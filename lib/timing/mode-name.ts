import type { RasterTiming } from "@/lib/timing/raster";
import { activeFrameLines, fieldRateHz } from "@/lib/timing/rates";

/** The short name of a raster: frame lines, `p` or `i`, and the field rate to a whole Hz ("240p60", "480i60"). */
export function modeName(timing: RasterTiming): string {
  const scan = timing.interlaced ? "i" : "p";
  return `${activeFrameLines(timing)}${scan}${Math.round(fieldRateHz(timing))}`;
}
