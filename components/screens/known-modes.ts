import { catalogue } from "@/lib/timing/catalogue/catalogue";
import type { CatalogueEntry } from "@/lib/timing/catalogue/catalogue-entry";
import { modeName } from "@/lib/timing/mode-name";
import { fieldRateHz, frameLines, lineRateHz } from "@/lib/timing/rates";
import type { RasterTiming } from "@/lib/timing/raster";
import { standardNames, standardRaster } from "@/lib/timing/standards";

/** A mode with a place among the rates; two of the same rates are one. */
export type KnownMode = {
  readonly id: string;
  readonly name: string;
  readonly timing: RasterTiming;
  /** Longer than another of its name by some lines. */
  readonly isVariant?: boolean;
};

/** Published rasters that a set for 15 kHz may take. */
const is15kHz = ({ timing }: CatalogueEntry) => lineRateHz(timing) > 15_000 && lineRateHz(timing) < 17_000;

const ratesKey = (timing: RasterTiming) =>
  `${lineRateHz(timing).toFixed(1)} ${fieldRateHz(timing).toFixed(3)} ${timing.interlaced}`;

/** "288p50" for the shortest field of a name, "288p50, 313 lines" for its longer variants. */
function namedModes(entries: readonly CatalogueEntry[]): readonly KnownMode[] {
  const seen = new Set<string>();
  return entries.map(({ id, timing }) => {
    const name = modeName(timing);
    const isVariant = seen.has(name);
    seen.add(name);
    return { id, name: isVariant ? `${name}, ${frameLines(timing)} lines` : name, timing, isVariant };
  });
}

function oneForEachRate(entries: readonly CatalogueEntry[]): readonly CatalogueEntry[] {
  const byRates = new Map<string, CatalogueEntry>();
  for (const entry of entries) {
    const key = ratesKey(entry.timing);
    if (!byRates.has(key)) byRates.set(key, entry);
  }
  return [...byRates.values()];
}

/** The catalogue's 15 kHz modes by line rate and field rate, then the standards of 31 kHz. */
export const knownModes: readonly KnownMode[] = [
  ...namedModes(oneForEachRate(catalogue.filter(is15kHz))),
  ...standardNames
    .map((name) => ({ id: name, name, timing: standardRaster(name).timing }))
    .filter(({ timing }) => lineRateHz(timing) >= 17_000),
];
