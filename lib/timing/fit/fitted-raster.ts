import { catalogue } from "@/lib/timing/catalogue/catalogue";
import { dmtCode, type CatalogueEntry } from "@/lib/timing/catalogue/catalogue-entry";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { figure, withUnit } from "@/lib/timing/figure-text";
import type { FittedRaster } from "@/lib/timing/fit/fit-types";
import { judgeBlanking, type BlankingPart, type BlankingVerdict } from "@/lib/timing/judge-blanking";
import { judgeEnvelope, type RasterRule } from "@/lib/timing/judge-envelope";
import type { RasterTiming } from "@/lib/timing/raster";
import { fieldRateHz, lineRateHz } from "@/lib/timing/rates";
import { sameRaster } from "@/lib/timing/same-raster";

const ruleWords: Readonly<Record<RasterRule, string>> = {
  "line-rate": "line rates",
  "field-rate": "field rates",
  interlace: "interlace",
  clock: "pixel clock limit",
  sync: "shortest sync",
  "back-porch": "shortest back porch",
  "field-blank": "shortest field blanking",
};

const partWords: Readonly<Record<BlankingPart, string>> = {
  frontPorch: "front porch",
  sync: "sync",
  backPorch: "back porch",
  blank: "blanking",
};

function blankingNote({ axis, part, measured, unit, span }: BlankingVerdict): string {
  const name = `${axis === "horizontal" ? "Line" : "Field"} ${partWords[part]}`;
  const value = withUnit(measured, unit, 2);
  if (span === undefined) return `${name} of ${value}.`;
  return `${name} of ${value}; the standards of this line rate have ${figure(span[0], { decimalsAtMost: 2 })} to ${withUnit(span[1], unit, 2)}.`;
}

/** "CTA-861, code 8, 262 lines in all" */
export function standardWords(entry: CatalogueEntry): string {
  const code =
    entry.code === undefined ? entry.name : `code ${entry.document === "VESA DMT" ? dmtCode(entry.code) : entry.code}`;
  return [entry.document, code, entry.note].filter((word) => word !== undefined).join(", ");
}

/** The published raster that a timing is, polarities included. */
export function publishedAs(timing: RasterTiming): CatalogueEntry | undefined {
  return catalogue.find((entry) => sameRaster(entry.timing, timing));
}

function notesOn(timing: RasterTiming, screen: ScreenEnvelope, standard: CatalogueEntry | undefined): string[] {
  const unknown = judgeEnvelope(timing, screen)
    .filter(({ outcome }) => outcome === "unknown")
    .map(({ rule }) => ruleWords[rule]);
  return [
    ...(standard === undefined ? [] : [`${standardWords(standard)}.`]),
    ...judgeBlanking(timing)
      .filter(({ outcome }) => outcome !== "inside")
      .map(blankingNote),
    ...(unknown.length === 0 ? [] : [`Not known of this screen: ${unknown.join(", ")}.`]),
  ];
}

/** A raster as an answer: rates, the standard that it is, and what should be known before it is used. */
export function fittedRaster(
  timing: RasterTiming,
  wishedFieldHz: number,
  screen: ScreenEnvelope,
  porchCost: number,
): FittedRaster {
  const standard = publishedAs(timing);
  const field = fieldRateHz(timing);
  return {
    timing,
    lineRateHz: lineRateHz(timing),
    fieldRateHz: field,
    rateErrorHz: field - wishedFieldHz,
    porchCost,
    ...(standard === undefined ? {} : { standard: standard.id }),
    notes: notesOn(timing, screen, standard),
  };
}
