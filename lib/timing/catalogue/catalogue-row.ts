import type { AxisTiming, RasterTiming } from "@/lib/timing/raster";

/**
 * One published raster as its table prints it: number, active px, active lines of the **frame**,
 * `p`rogressive, `i`nterlaced or interlaced with `e`qual fields, clock in Hz, aspect, then front porch, sync, back porch
 * and polarity across, and the same down, in lines per field.
 */
export type CatalogueRow = readonly [
  number: number,
  activePx: number,
  activeFrameLines: number,
  scan: "p" | "i" | "e",
  pixelClockHz: number,
  aspect: string,
  hFront: number,
  hSync: number,
  hBack: number,
  hPolarity: "P" | "N",
  vFront: number,
  vSync: number,
  vBack: number,
  vPolarity: "P" | "N",
];

function axis(active: number, frontPorch: number, sync: number, backPorch: number, polarity: "P" | "N"): AxisTiming {
  return { active, frontPorch, sync, backPorch, polarity: polarity === "P" ? "positive" : "negative" };
}

/** The raster of a row, its vertical figures in lines per field. */
export function timingOfRow(row: CatalogueRow): RasterTiming {
  const [, px, lines, scan, pixelClockHz, , hFront, hSync, hBack, hPolarity, vFront, vSync, vBack, vPolarity] = row;
  const interlaced = scan !== "p";
  return {
    pixelClockHz,
    interlaced,
    ...(scan === "e" ? { equalFields: true } : {}),
    horizontal: axis(px, hFront, hSync, hBack, hPolarity),
    vertical: axis(interlaced ? lines / 2 : lines, vFront, vSync, vBack, vPolarity),
  };
}
