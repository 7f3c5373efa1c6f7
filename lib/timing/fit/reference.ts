import { blankingSpan, type BlankingSpan, type BlankingSpans } from "@/lib/timing/blanking-span";
import { ctaCatalogue } from "@/lib/timing/catalogue/catalogue";
import { analogSystems } from "@/lib/timing/catalogue/analog-systems";
import type { Span } from "@/lib/timing/envelope";
import type { Polarity, RasterTiming } from "@/lib/timing/raster";
import type { AxisParts } from "@/lib/timing/rates";
import { fieldRateHz, horizontalUs, lineRateHz } from "@/lib/timing/rates";
import { standardRaster, type StandardName } from "@/lib/timing/standards";

/** What a fitted raster's blanking aims at, and what it may be: across in µs, down in lines. */
export type BlankingGuide = {
  readonly aimUs: Omit<AxisParts, "active">;
  readonly aimLines: Omit<AxisParts, "active">;
  readonly spanUs: BlankingSpans;
  readonly spanLines: BlankingSpans;
  readonly polarity: Polarity;
};

/** Within this share of a standard's line rate its µs are taken as they are; farther off its shares of the line. */
const SAME_KIND = 0.03;

/** How far from the aim a part may be where no standard of the line rate says so. Ours, no source. */
const FREEDOM = 0.25;

type Reference = {
  readonly lineRateHz: number;
  readonly fieldRateHz: number;
  readonly us: AxisParts;
  readonly lines: AxisParts;
  readonly polarity: Polarity;
};

function referenceOf(timing: RasterTiming): Reference {
  return {
    lineRateHz: lineRateHz(timing),
    fieldRateHz: fieldRateHz(timing),
    us: horizontalUs(timing),
    lines: timing.vertical,
    polarity: timing.horizontal.polarity,
  };
}

/** The formats that CRTs are made for: whatever the line rate, one of these is the pattern. */
const crtNames: readonly StandardName[] = ["240p60", "288p50", "480p60", "576p50"];
const crtReferences = crtNames.map((name) => referenceOf(standardRaster(name).timing));

/** 1080i60, 1080i50, 720p60, 720p50, 1080p60 and 1080p50: a pattern at their own line rates alone. */
const highDefinitionVics = [5, 20, 4, 19, 16, 31];
const highDefinitionReferences = ctaCatalogue
  .filter(({ code }) => code !== undefined && highDefinitionVics.includes(code))
  .map(({ timing }) => referenceOf(timing));

/** A reference with the logarithms of its rates: they are compared for each count of lines of a search. */
const withLogs = (reference: Reference) => ({
  reference,
  logLine: Math.log(reference.lineRateHz),
  logField: Math.log(reference.fieldRateHz),
});
const crtByLogs = crtReferences.map(withLogs);
const highDefinitionByLogs = highDefinitionReferences.map(withLogs);

function nearestReference(rateHz: number, fieldHz: number): Reference {
  const [logLine, logField] = [Math.log(rateHz), Math.log(fieldHz)];
  let best: Reference | undefined;
  let least = Infinity;
  for (const list of [crtByLogs, highDefinitionByLogs]) {
    for (const one of list) {
      const isOwn = list === crtByLogs || Math.abs(one.reference.lineRateHz / rateHz - 1) <= SAME_KIND;
      const far = Math.abs(logLine - one.logLine) + Math.abs(logField - one.logField);
      if (!isOwn || (best !== undefined && far >= least)) continue;
      best = one.reference;
      least = far;
    }
  }
  // There is always one: the CRT formats are taken at any line rate.
  if (best === undefined) throw new Error("no reference raster");
  return best;
}

/**
 * Sets of a standard's line rate are stretched this far at most: within it the standard's spans are the best that is
 * known, though it is not of that line rate. Ours, no source.
 */
const STRETCH = 0.08;

/** What is published for the nearest CRT standard's line rate, where that is not far. */
function stretchedSpan(rateHz: number): BlankingSpan | undefined {
  const far = (one: Reference) => Math.abs(one.lineRateHz / rateHz - 1);
  const near = crtReferences.reduce((best, one) => (far(one) < far(best) ? one : best));
  return far(near) <= STRETCH ? blankingSpan(near.lineRateHz) : undefined;
}

function around(parts: Omit<AxisParts, "active">): BlankingSpans {
  const span = (value: number): Span => [value * (1 - FREEDOM), value * (1 + FREEDOM)];
  return {
    frontPorch: span(parts.frontPorch),
    sync: span(parts.sync),
    backPorch: span(parts.backPorch),
    blank: span(parts.frontPorch + parts.sync + parts.backPorch),
  };
}

const hull = (a: Span, b: Span): Span => [Math.min(a[0], b[0]), Math.max(a[1], b[1])];

/** Both spans together, part by part. */
function together(a: BlankingSpans, b: BlankingSpans): BlankingSpans {
  return {
    frontPorch: hull(a.frontPorch, b.frontPorch),
    sync: hull(a.sync, b.sync),
    backPorch: hull(a.backPorch, b.backPorch),
    blank: hull(a.blank, b.blank),
  };
}

/**
 * BT.470 gives 525/60 a field blanking of 19 to 21 lines: we aim no lower than the middle of it, so that a set of the
 * longer kind has its retrace too.
 */
const leastTelevisionBlankLines = (() => {
  const spans = analogSystems.map(({ fieldBlankLines }) => (fieldBlankLines[0] + fieldBlankLines[1]) / 2);
  return Math.min(...spans);
})();

/**
 * What blanking should be at a line and field rate: that of the nearest of CTA-861's 240p60, 288p50, 480p60, 576p50,
 * or of a format of high definition where the line rate is one of theirs.
 *
 * The spans are those of `blankingSpan`, also for line rates up to 8 % from one of those four; at television rates the field blanking is 20 lines at least. Where no
 * standard has the line rate, a quarter either way of the nearest standard's share of the line; and both together at the
 * line rates of high definition, whose one format is too narrow to fit a picture of another width to.
 */
export function blankingGuide(rateHz: number, fieldHz: number): BlankingGuide {
  const reference = nearestReference(rateHz, fieldHz);
  const ratio = reference.lineRateHz / rateHz;
  const scale = Math.abs(ratio - 1) <= SAME_KIND ? 1 : ratio;
  const { frontPorch, sync, backPorch } = reference.us;
  const aimUs = { frontPorch: frontPorch * scale, sync: sync * scale, backPorch: backPorch * scale };
  const { polarity, lines: aimLines } = reference;
  const own = blankingSpan(rateHz);
  const published = own ?? stretchedSpan(rateHz);
  if (published === undefined) return { aimUs, aimLines, spanUs: around(aimUs), spanLines: around(aimLines), polarity };
  const isCrt = own === undefined || crtReferences.some((one) => Math.abs(one.lineRateHz / rateHz - 1) <= SAME_KIND);
  if (!isCrt) {
    const spanUs = together(published.horizontalUs, around(aimUs));
    return { aimUs, aimLines, spanUs, spanLines: together(published.verticalLines, around(aimLines)), polarity };
  }
  const television = published.from.some((name) => name.startsWith("BT.470"));
  const [least, most] = published.verticalLines.blank;
  const blank: Span = [television ? Math.max(least, leastTelevisionBlankLines) : least, most];
  return {
    aimUs,
    aimLines,
    spanUs: published.horizontalUs,
    spanLines: { ...published.verticalLines, blank },
    polarity,
  };
}
