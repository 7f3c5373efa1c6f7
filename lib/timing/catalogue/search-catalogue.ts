import { catalogue } from "@/lib/timing/catalogue/catalogue";
import { dmtCode, type CatalogueEntry } from "@/lib/timing/catalogue/catalogue-entry";
import { activeFrameLines, fieldLines, fieldRateHz, lineRateHz, lineTotal } from "@/lib/timing/rates";
import type { RasterTiming } from "@/lib/timing/raster";

export type CatalogueQuery = {
  /** Picture lines of a frame, or of a field of an interlaced raster: 240 finds 240p and 480i. */
  readonly lines?: number | undefined;
  /** Field rate in Hz, within half a Hz. */
  readonly rateHz?: number | undefined;
  /** Words that all occur in the id, the name, the document, the code, the aspect or the note. */
  readonly text?: string | undefined;
};

/** An entry with its rates, as lists show it. */
export type CatalogueRecord = CatalogueEntry & { readonly lineRateHz: number; readonly fieldRateHz: number };

/** "60" finds 59.94 and 60.05. */
const RATE_TOLERANCE_HZ = 0.5;

/** No more words of a query are looked at. */
const MAX_WORDS = 8;

function searchText({ id, name, document, code, aspect, note }: CatalogueEntry): string {
  const number = code === undefined ? "" : document === "CTA-861" ? `vic ${code} code ${code}` : dmtCode(code);
  return `${id} ${name} ${document} ${number} ${aspect} ${note ?? ""}`.toLowerCase();
}

const records: readonly (CatalogueRecord & { readonly text: string })[] = catalogue.map((entry) => ({
  ...entry,
  lineRateHz: lineRateHz(entry.timing),
  fieldRateHz: fieldRateHz(entry.timing),
  text: searchText(entry),
}));

function hasLines({ timing }: CatalogueEntry, lines: number): boolean {
  return activeFrameLines(timing) === lines || timing.vertical.active === lines;
}

/** Entries of the catalogue that meet every part of the query, in the catalogue's order; all of them for an empty one. */
export function searchCatalogue({ lines, rateHz, text = "" }: CatalogueQuery): CatalogueRecord[] {
  const words = text
    .toLowerCase()
    .split(/\s+/u)
    .filter((word) => word !== "")
    .slice(0, MAX_WORDS);
  return records
    .filter((record) => lines === undefined || hasLines(record, lines))
    .filter((record) => rateHz === undefined || Math.abs(record.fieldRateHz - rateHz) <= RATE_TOLERANCE_HZ)
    .filter((record) => words.every((word) => record.text.includes(word)))
    .map(({ text: _text, ...record }) => record);
}

/** The entry of an id; undefined for none. */
export function catalogueEntry(id: string): CatalogueRecord | undefined {
  const found = records.find((record) => record.id === id);
  if (found === undefined) return undefined;
  const { text: _text, ...record } = found;
  return record;
}

/** One figure of two rasters side by side. */
export type RasterDifference = {
  readonly figure: string;
  readonly left: number | string;
  readonly right: number | string;
  readonly unit: "Hz" | "clocks" | "lines" | "";
  readonly same: boolean;
};

/** Every figure of two rasters, in the order of a table: rates, totals, the parts across and down, scan and polarities. */
export function compareRasters(left: RasterTiming, right: RasterTiming): RasterDifference[] {
  const row = (figure: string, unit: RasterDifference["unit"], of: (timing: RasterTiming) => number | string) => {
    const [a, b] = [of(left), of(right)];
    return { figure, left: a, right: b, unit, same: a === b };
  };
  const parts = ["active", "frontPorch", "sync", "backPorch"] as const;
  return [
    row("pixelClockHz", "Hz", (timing) => timing.pixelClockHz),
    row("lineRateHz", "Hz", lineRateHz),
    row("fieldRateHz", "Hz", fieldRateHz),
    row("lineTotal", "clocks", lineTotal),
    row("fieldLines", "lines", fieldLines),
    ...parts.map((part) => row(`horizontal.${part}`, "clocks", (timing) => timing.horizontal[part])),
    ...parts.map((part) => row(`vertical.${part}`, "lines", (timing) => timing.vertical[part])),
    row("scan", "", (timing) => (timing.interlaced ? "interlaced" : "progressive")),
    row("horizontal.polarity", "", (timing) => timing.horizontal.polarity),
    row("vertical.polarity", "", (timing) => timing.vertical.polarity),
  ];
}
