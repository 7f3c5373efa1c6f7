import type { RasterTiming } from "@/lib/timing/raster";
import { standardRaster } from "@/lib/timing/standards";

const base = standardRaster("240p60").timing;

/** 270 lines at the 525-line rate: 290 in all, so about 54 fields a second. */
export const lines270: RasterTiming = {
  ...base,
  vertical: { ...base.vertical, active: 270, frontPorch: 3, sync: 3, backPorch: 14 },
};

/** The 240-line raster with a sync of 2.2 µs: under what a 15 kHz screen wants. The porches take up the difference. */
export const shortSync: RasterTiming = {
  ...base,
  horizontal: { ...base.horizontal, frontPorch: 70, sync: 60, backPorch: 146 },
};

/** The 240-line raster with a back porch of 2.6 µs. */
export const thinBackPorch: RasterTiming = {
  ...base,
  horizontal: { ...base.horizontal, frontPorch: 82, sync: 124, backPorch: 70 },
};

/** 224 lines with the totals of the 240-line raster. */
export const lines224: RasterTiming = {
  ...base,
  vertical: { ...base.vertical, active: 224, frontPorch: 12, sync: 3, backPorch: 23 },
};

/** The 240-line raster with 2 clocks more a line: 15.716 kHz, a field rate of 59.98 Hz. */
export const slower240: RasterTiming = {
  ...base,
  horizontal: { ...base.horizontal, backPorch: base.horizontal.backPorch + 2 },
};
