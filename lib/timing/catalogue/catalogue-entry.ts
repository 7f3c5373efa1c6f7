import type { RasterTiming } from "@/lib/timing/raster";

export type CatalogueDocument = "CTA-861" | "VESA DMT" | "ITU-R BT.601 and BT.470";

/** A published raster. `code` is its number in its document: a VIC, or a DMT identifier. */
export type CatalogueEntry = {
  readonly id: string;
  readonly name: string;
  readonly document: CatalogueDocument;
  readonly code?: number | undefined;
  readonly aspect: string;
  readonly timing: RasterTiming;
  /** What the name does not say, such as the variant of a line count. */
  readonly note?: string | undefined;
};

/** A DMT identifier as VESA prints it: "0x0f". */
export function dmtCode(code: number): string {
  return `0x${code.toString(16).padStart(2, "0")}`;
}
