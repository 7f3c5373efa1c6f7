import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { RasterTiming } from "@/lib/timing/raster";

/** Why bytes are not an EDID. Anything less than that is a warning. */
export type EdidError = {
  readonly code: "too-short" | "too-long" | "header" | "checksum";
  readonly message: string;
};

export type EdidProduct = {
  /** Three letters. */
  readonly maker: string;
  readonly code: number;
  readonly name?: string | undefined;
  readonly serial?: string | undefined;
  readonly year?: number | undefined;
};

/** A timing that an EDID lists, by raster; `from` says where in it. */
export type EdidTiming = {
  readonly from: "detailed" | "established" | "standard" | "cta-code";
  readonly name: string;
  readonly timing: RasterTiming;
};

/** The range limits descriptor, its offset flags applied. */
export type EdidRanges = {
  readonly fieldRateHz: readonly [number, number];
  readonly lineRateHz: readonly [number, number];
  /** As the descriptor states it, in steps of 10 MHz. */
  readonly maxPixelClockHz?: number | undefined;
  /** What a CVT descriptor says that figure is rounded up from. */
  readonly exactPixelClockHz?: number | undefined;
};

/** What the base block and the CTA-861 extensions hold, as far as an envelope needs it. */
export type EdidReading = {
  readonly version: string;
  readonly product: EdidProduct;
  readonly input: "analog" | "digital";
  /** Analog inputs only: the syncs that it takes. */
  readonly syncs?: { readonly separate: boolean; readonly composite: boolean; readonly onGreen: boolean } | undefined;
  readonly sizeCm?: { readonly width: number; readonly height: number } | undefined;
  readonly ranges?: EdidRanges | undefined;
  readonly timings: readonly EdidTiming[];
  readonly warnings: readonly string[];
};

/** An EDID as a screen: what the form for a new screen is filled with. */
export type EdidScreen = {
  readonly screen: ScreenEnvelope;
  readonly product: EdidProduct;
  readonly notes: readonly string[];
  readonly warnings: readonly string[];
};
