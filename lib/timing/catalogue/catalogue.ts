import { analogRasters } from "@/lib/timing/catalogue/analog-rasters";
import { timingOfRow, type CatalogueRow } from "@/lib/timing/catalogue/catalogue-row";
import { ctaRows } from "@/lib/timing/catalogue/cta-861-rows";
import { dmtRows } from "@/lib/timing/catalogue/vesa-dmt-rows";
import type { RasterTiming } from "@/lib/timing/raster";
import { modeName } from "@/lib/timing/mode-name";

export type CatalogueDocument = "CTA-861" | "VESA DMT" | "ITU-R BT.601 and BT.470";

/** A published raster. `code` is its number in its document: a VIC, or a DMT identifier. */
export type CatalogueEntry = {
  readonly id: string;
  readonly name: string;
  readonly document: CatalogueDocument;
  readonly code?: number | undefined;
  readonly aspect: string;
  readonly timing: RasterTiming;
  /** What the name does not say: a variant of a line count, pixels sent twice. */
  readonly note?: string | undefined;
};

/**
 * Formats whose field may be longer than the table's by one or two lines, all of it front porch.
 *
 * Source: CTA-861 (240 lines: 262 or 263 in all; 288 lines: 312, 313 or 314), as Linux drm_edid.c has it in
 * `cea_mode_alternate_timings`.
 */
const lineCountVariants: ReadonlyMap<number, number> = new Map([
  ...[8, 9, 12, 13].map((code) => [code, 1] as const),
  ...[23, 24, 27, 28].map((code) => [code, 2] as const),
]);

function longerBy(timing: RasterTiming, lines: number): RasterTiming {
  const vertical = { ...timing.vertical, frontPorch: timing.vertical.frontPorch + lines };
  return { ...timing, vertical };
}

function ctaEntries(row: CatalogueRow): CatalogueEntry[] {
  const [code, activePx, , , , aspect] = row;
  const timing = timingOfRow(row);
  const total = (t: RasterTiming) => t.vertical.active + t.vertical.frontPorch + t.vertical.sync + t.vertical.backPorch;
  const base = { name: `${modeName(timing)}, ${activePx} px`, document: "CTA-861", code, aspect } as const;
  const longest = lineCountVariants.get(code) ?? 0;
  const variants = Array.from({ length: longest }, (_, index) => {
    const longer = longerBy(timing, index + 1);
    return { ...base, id: `cta-861-${code}-${total(longer)}`, timing: longer, note: `${total(longer)} lines in all` };
  });
  const note = longest > 0 ? { note: `${total(timing)} lines in all` } : {};
  return [{ ...base, id: `cta-861-${code}`, timing, ...note }, ...variants];
}

function dmtEntry(row: CatalogueRow): CatalogueEntry {
  const [code, activePx, , , , aspect] = row;
  const timing = timingOfRow(row);
  const id = `vesa-dmt-${code.toString(16).padStart(2, "0")}`;
  return { id, name: `${modeName(timing)}, ${activePx} px`, document: "VESA DMT", code, aspect, timing };
}

/** CTA-861 by code, with the line-count variants of its 240 and 288 line formats. */
export const ctaCatalogue: readonly CatalogueEntry[] = ctaRows.flatMap(ctaEntries);

/** VESA DMT by identifier. */
export const dmtCatalogue: readonly CatalogueEntry[] = dmtRows.map(dmtEntry);

/** Every published raster that we know, each once a code. */
export const catalogue: readonly CatalogueEntry[] = [...ctaCatalogue, ...dmtCatalogue, ...analogRasters];
