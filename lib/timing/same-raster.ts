import type { AxisTiming, RasterTiming } from "@/lib/timing/raster";

function sameAxis(a: AxisTiming, b: AxisTiming): boolean {
  return (
    a.active === b.active &&
    a.frontPorch === b.frontPorch &&
    a.sync === b.sync &&
    a.backPorch === b.backPorch &&
    a.polarity === b.polarity
  );
}

/** The same counts, polarities and kind of scan, whatever the pixel clock. */
export function sameCounts(a: RasterTiming, b: RasterTiming): boolean {
  return (
    a.interlaced === b.interlaced &&
    (a.equalFields === true) === (b.equalFields === true) &&
    sameAxis(a.horizontal, b.horizontal) &&
    sameAxis(a.vertical, b.vertical)
  );
}

/** Two timings that put the same signal out. */
export function sameRaster(a: RasterTiming, b: RasterTiming): boolean {
  return a.pixelClockHz === b.pixelClockHz && sameCounts(a, b);
}
