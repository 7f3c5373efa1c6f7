/** Polarity of a sync pulse. */
export type Polarity = "positive" | "negative";

/** One axis of a raster: horizontal in pixel clocks, vertical in lines per field. All whole numbers. */
export type AxisTiming = {
  readonly active: number;
  readonly frontPorch: number;
  readonly sync: number;
  readonly backPorch: number;
  readonly polarity: Polarity;
};

/**
 * An output raster ("mode"). Vertical figures count lines **per field**.
 *
 * An interlaced frame has 2·V + 1 lines (V = field lines), or 2·V where `equalFields` is set
 * (one published format has them so: CTA-861 VIC 39).
 */
export type RasterTiming = {
  readonly pixelClockHz: number;
  readonly interlaced: boolean;
  /** Only with `interlaced`; absent means false. */
  readonly equalFields?: boolean | undefined;
  readonly horizontal: AxisTiming;
  readonly vertical: AxisTiming;
};

/** What comes in: active px, active lines **per frame**, and the rate of its fields. */
export type SourceFormat = {
  readonly activePx: number;
  readonly activeLines: number;
  readonly interlaced: boolean;
  readonly fieldRateHz: number;
};

/** Ends of what a device can hold for each part of an axis, in the axis's own unit. */
export type DevicePartSpans = {
  readonly [part in "active" | "frontPorch" | "sync" | "backPorch"]?: readonly [min: number, max: number] | undefined;
};

/** Pixel-clock and total limits of a device, as the fitting engine needs them. Absent = unknown. */
export type DeviceTimingLimits = {
  readonly clockHz?: { readonly min: number; readonly max: number; readonly step: number } | undefined;
  /** Horizontal figures are multiples of this many clocks. */
  readonly horizontalMultiple?: number | undefined;
  readonly maxLineTotal?: number | undefined;
  /** Lines per field, in all. */
  readonly maxFieldLines?: number | undefined;
  readonly interlace?: boolean | undefined;
  readonly horizontal?: DevicePartSpans | undefined;
  readonly vertical?: DevicePartSpans | undefined;
  /** `input`: the clock follows what arrives, so that the field rate that comes out is the source's. */
  readonly outputClock?: "free" | "input" | undefined;
};
