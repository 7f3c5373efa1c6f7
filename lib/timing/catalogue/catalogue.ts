import { analogRasters } from "@/lib/timing/catalogue/analog-rasters";
import type { CatalogueEntry } from "@/lib/timing/catalogue/catalogue-entry";
import { timingOfRow, type CatalogueRow } from "@/lib/timing/catalogue/catalogue-row";
import { ctaRows } from "@/lib/timing/catalogue/cta-861-rows";
import { dmtRows } from "@/lib/timing/catalogue/vesa-dmt-rows";
import { modeName } from "@/lib/timing/mode-name";
import type { RasterTiming } from "@/lib/timing/raster";
import { fieldLines } from "@/lib/timing/rates";

/**
 * By how many lines a field may be longer than the table's, all of it front porch.
 *
 * Source: CTA-861 (240 lines: 262 or 263 in all; 288 lines: 312, 313 or 314), as Linux drm_edid.c has it in
 * `cea_mode_alternate_timings`.
 */
const longestByVic: ReadonlyMap<number, number> = new Map([
  ...[8, 9, 12, 13].map((vic) => [vic, 1] as const),
  ...[23, 24, 27, 28].map((vic) => [vic, 2] as const),
]);

function longerBy(timing: RasterTiming, lines: number): RasterTiming {
  const vertical = { ...timing.vertical, frontPorch: timing.vertical.frontPorch + lines };
  return { ...timing, vertical };
}

function ctaEntries(row: CatalogueRow): CatalogueEntry[] {
  const [code, activePx, , , , aspect] = row;
  const timing = timingOfRow(row);
  const base = { name: `${modeName(timing)}, ${activePx} px`, document: "CTA-861", code, aspect } as const;
  const longest = longestByVic.get(code);
  if (longest === undefined) return [{ ...base, id: `cta-861-${code}`, timing }];
  return Array.from({ length: longest + 1 }, (_, lines) => {
    const variant = longerBy(timing, lines);
    const total = fieldLines(variant);
    const id = lines === 0 ? `cta-861-${code}` : `cta-861-${code}-${total}`;
    return { ...base, id, timing: variant, note: `${total} lines in all` };
  });
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

/** Every published raster that we know. */
export const catalogue: readonly CatalogueEntry[] = [...ctaCatalogue, ...dmtCatalogue, ...analogRasters];
