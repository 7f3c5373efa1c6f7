import type { AxisTiming, RasterTiming } from "@/lib/timing/raster";

/** One figure for each part of an axis, in the unit of the name that carries it. */
export type AxisParts = {
  readonly active: number;
  readonly frontPorch: number;
  readonly sync: number;
  readonly backPorch: number;
};

/** All parts of an axis together, in the axis's own unit. */
export function axisTotal(axis: AxisTiming): number {
  return axis.active + axis.frontPorch + axis.sync + axis.backPorch;
}

/** What is not picture on an axis: front porch, sync and back porch together, in the axis's own unit. */
export function axisBlank(axis: AxisTiming): number {
  return axis.frontPorch + axis.sync + axis.backPorch;
}

/** Pixel clocks in one line, blanking included. */
export function lineTotal(timing: RasterTiming): number {
  return axisTotal(timing.horizontal);
}

/** Whole lines in one field, blanking included; an interlaced field has half a line more (see `frameLines`). */
export function fieldLines(timing: RasterTiming): number {
  return axisTotal(timing.vertical);
}

/**
 * Lines in one frame: those of the one field, or of both where the raster is interlaced.
 *
 * Interlaced frames are odd (2 · V + 1), so that the second field starts half a line later.
 * The exception is CTA-861 code 39, whose fields are equal (2 · V).
 */
export function frameLines(timing: RasterTiming): number {
  const lines = fieldLines(timing);
  if (!timing.interlaced) return lines;
  return timing.equalFields === true ? 2 * lines : 2 * lines + 1;
}

/** Picture lines of one frame: what "480" counts in 480i. */
export function activeFrameLines(timing: RasterTiming): number {
  return timing.interlaced ? 2 * timing.vertical.active : timing.vertical.active;
}

/** Lines between two starts of a field: 262, or 262.5 for the 525-line pair. */
export function linesPerField(timing: RasterTiming): number {
  return timing.interlaced ? frameLines(timing) / 2 : fieldLines(timing);
}

/** Line rate in Hz: pixel clock by line total. 27 MHz by 1 716 clocks give 15 734.266. */
export function lineRateHz(timing: RasterTiming): number {
  return timing.pixelClockHz / lineTotal(timing);
}

/**
 * Field rate of a raster.
 *
 * An interlaced frame has an odd line count, so its two fields share 2 · V + 1 lines.
 * @param timing vertical figures in lines per field
 * @returns Hz. 262 lines at 15 734.266 Hz give 60.054; the 525-line pair gives 59.940.
 * Source: ITU-R BT.470-5 (525/60); CTA-861 VIC 6 and 8.
 */
export function fieldRateHz(timing: RasterTiming): number {
  // One division by whole numbers keeps 27 000 000 / (1728 · 625) · 2 at 50 exactly.
  const fields = timing.interlaced ? 2 : 1;
  return (fields * timing.pixelClockHz) / (lineTotal(timing) * frameLines(timing));
}

/** Length of each part of a line, in µs. */
export function horizontalUs(timing: RasterTiming): AxisParts {
  const us = (clocks: number) => (clocks * 1e6) / timing.pixelClockHz;
  const { active, frontPorch, sync, backPorch } = timing.horizontal;
  return { active: us(active), frontPorch: us(frontPorch), sync: us(sync), backPorch: us(backPorch) };
}

/** Length of one line, in µs. */
export function linePeriodUs(timing: RasterTiming): number {
  return 1e6 / lineRateHz(timing);
}

/**
 * Field blanking (front porch, sync and back porch), in lines.
 *
 * Each field of an interlaced pair has half a line more than its whole lines, before or after the sync.
 */
export function fieldBlankLines(timing: RasterTiming): number {
  return axisBlank(timing.vertical) + (linesPerField(timing) - fieldLines(timing));
}

/** Field blanking in µs. */
export function fieldBlankUs(timing: RasterTiming): number {
  return fieldBlankLines(timing) * linePeriodUs(timing);
}
