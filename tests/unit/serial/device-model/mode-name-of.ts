import { modeName } from "@/lib/timing/mode-name";
import type { RasterTiming } from "@/lib/timing/raster";

/** What a raster is called; `nothing` where none is out. */
export function modeNameOf(raster: RasterTiming | null): string {
  return raster === null ? "nothing" : modeName(raster);
}
