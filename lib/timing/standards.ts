import { ctaRows } from "@/lib/timing/catalogue/cta-861-rows";
import { timingOfRow } from "@/lib/timing/catalogue/catalogue-row";
import type { RasterTiming } from "@/lib/timing/raster";

/** The rasters that a CRT of standard definition is made for, by the name they go by here. */
export type StandardName = "240p60" | "288p50" | "480i60" | "576i50" | "480p60" | "480p60-640" | "576p50";

/** A standard raster with its CTA-861 codes (one for each aspect). */
export type StandardRaster = {
  readonly name: StandardName;
  readonly vics: readonly number[];
  readonly timing: RasterTiming;
};

/** CTA-861 codes by name: 720 px unless the name says 640, sent twice (1 440) in the 15 kHz formats. */
const vicsByName: Readonly<Record<StandardName, readonly [number, ...number[]]>> = {
  "240p60": [8, 9],
  "288p50": [23, 24],
  "480i60": [6, 7],
  "576i50": [21, 22],
  "480p60": [2, 3],
  "480p60-640": [1],
  "576p50": [17, 18],
};

function ofVic(vic: number): RasterTiming {
  const row = ctaRows.find(([code]) => code === vic);
  if (row === undefined) throw new Error(`CTA-861 code ${vic} is not in the table`);
  return timingOfRow(row);
}

/** All names of `StandardName`, in the order in which they are offered. */
export const standardNames: readonly StandardName[] = [
  "240p60",
  "288p50",
  "480i60",
  "576i50",
  "480p60",
  "480p60-640",
  "576p50",
];

/** The raster of a name. Source: CTA-861, the codes in `vics`; link values, so 1 440 px at 27 MHz at 15 kHz. */
export function standardRaster(name: StandardName): StandardRaster {
  const vics = vicsByName[name];
  return { name, vics, timing: ofVic(vics[0]) };
}
