import { fitOf, misfitInShort } from "@/components/screens/fit-words";
import type { Fit } from "@/components/screens/fit-words";
import { documentsByKey, queryOf } from "@/components/standards/standards-address";
import type { StandardsState } from "@/components/standards/standards-address";
import { dmtCode } from "@/lib/timing/catalogue/catalogue-entry";
import type { CatalogueEntry } from "@/lib/timing/catalogue/catalogue-entry";
import { searchCatalogue } from "@/lib/timing/catalogue/search-catalogue";
import type { CatalogueRecord } from "@/lib/timing/catalogue/search-catalogue";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { RasterTiming } from "@/lib/timing/raster";

/** A published raster in the list; `fit` is null while no screen is chosen. */
export type StandardRow = CatalogueRecord & { readonly fit: (Fit & { readonly short: string }) | null };

function heldAgainst(timing: RasterTiming, envelope: ScreenEnvelope | null): StandardRow["fit"] {
  return envelope === null ? null : { ...fitOf(timing, envelope), short: misfitInShort(timing, envelope) };
}

/** "CTA-861, code 8", "VESA DMT, 0x04", "ITU-R BT.601 and BT.470". */
export function documentWords({ document, code }: Pick<CatalogueEntry, "document" | "code">): string {
  if (code === undefined) return document;
  return `${document}, ${document === "CTA-861" ? `code ${code}` : dmtCode(code)}`;
}

/** "240p60, 1440 px; 262 lines in all; CTA-861, code 8": what no other entry is called. */
export function entryWords(entry: CatalogueEntry): string {
  return [entry.name, entry.note, documentWords(entry)].filter((part) => part !== undefined).join("; ");
}

/** The entries that a state asks for, each held against the screen. */
export function standardRows(state: StandardsState, envelope: ScreenEnvelope | null): readonly StandardRow[] {
  const document = documentsByKey[state.document];
  return searchCatalogue(queryOf(state))
    .filter((entry) => document === undefined || entry.document === document)
    .map((entry) => ({ ...entry, fit: heldAgainst(entry.timing, envelope) }))
    .filter(({ fit }) => !state.fitting || fit === null || fit.fits);
}
