import type { EnvelopeBand, EnvelopeLimit, LimitSource, ScreenEnvelope, Span } from "@/lib/timing/envelope";
import type { RasterTiming } from "@/lib/timing/raster";
import { fieldBlankLines, fieldBlankUs, fieldRateHz, horizontalUs, linePeriodUs, lineRateHz } from "@/lib/timing/rates";
import { atLeast, atMost, inSpan, LIMIT_TOLERANCE, nearestInSpan } from "@/lib/timing/span";

/** The limits of an envelope that a raster can break. Sync kind and level belong to a slot, not to its raster. */
export type RasterRule = "line-rate" | "field-rate" | "interlace" | "clock" | "sync" | "back-porch" | "field-blank";

/** One limit of a screen against a raster. */
export type EnvelopeVerdict = {
  readonly rule: RasterRule;
  /** The member of `ScreenEnvelope` that sets the limit. */
  readonly limit: EnvelopeLimit;
  readonly outcome: "inside" | "outside" | "unknown";
  readonly measured: number;
  /** `fields` counts the fields of a frame: 2 where the raster is interlaced. */
  readonly unit: "Hz" | "µs" | "fields";
  /** Of several bands the one that lies nearest. Absent where the limit is unknown. */
  readonly min?: number | undefined;
  readonly max?: number | undefined;
  /** Where the raster is outside: the value nearest to `measured` that fits, and the least whole count that makes it. */
  readonly nearest?: number | undefined;
  readonly nearestCount?: { readonly count: number; readonly unit: "clocks" | "lines" } | undefined;
  /** Where the screen's limit comes from, if it says so. */
  readonly source?: LimitSource | undefined;
};

const holdsLine = (band: EnvelopeBand, rateHz: number) => inSpan(rateHz, band.lineRateHz);
const holdsField = (band: EnvelopeBand, rateHz: number) => inSpan(rateHz, band.fieldRateHz);
const ordered = ([min, max]: Span) => min <= max;

/** The bands that can hold a raster at all: a crossed one (`checkEnvelope` refuses it) holds none. */
function usableBands(screen: ScreenEnvelope): readonly EnvelopeBand[] {
  return screen.bands.filter((band) => ordered(band.lineRateHz) && ordered(band.fieldRateHz));
}

/** How far a value lies outside a span, as a share of the value. */
function distance(value: number, span: Span): number {
  return Math.abs(nearestInSpan(value, span) - value) / Math.abs(value);
}

function nearestSpan(value: number, spans: readonly Span[]): Span | undefined {
  return spans.reduce<Span | undefined>(
    (best, span) => (best === undefined || distance(value, span) < distance(value, best) ? span : best),
    undefined,
  );
}

type RateRule = { rule: "line-rate" | "field-rate"; measured: number; spans: readonly Span[]; inside: boolean };

function rateVerdict({ rule, measured, spans, inside }: RateRule): EnvelopeVerdict {
  const base = { rule, limit: "bands", measured, unit: "Hz" } as const;
  const span = nearestSpan(measured, spans);
  if (span === undefined) return { ...base, outcome: "outside" };
  const ends = { ...base, min: span[0], max: span[1] };
  return inside
    ? { ...ends, outcome: "inside" }
    : { ...ends, outcome: "outside", nearest: nearestInSpan(measured, span) };
}

const firstNotEmpty = <T>(...lists: readonly (readonly T[])[]): readonly T[] =>
  lists.find((list) => list.length > 0) ?? [];

/**
 * Line and field rate against the bands: one band has to hold both.
 *
 * A line rate that no band holds is told as such, its nearest value in a band that holds the field rate if there is
 * one. Where bands hold the line rate but not the field rate, the field rate is what is outside. Bands that are all
 * crossed hold nothing; no bands at all are unknown.
 */
function judgeBands(timing: RasterTiming, screen: ScreenEnvelope): EnvelopeVerdict[] {
  const [line, field] = [lineRateHz(timing), fieldRateHz(timing)];
  if (screen.bands.length === 0) {
    const unknown = { limit: "bands", outcome: "unknown", unit: "Hz" } as const;
    return [
      { ...unknown, rule: "line-rate", measured: line },
      { ...unknown, rule: "field-rate", measured: field },
    ];
  }
  const bands = usableBands(screen);
  const atLine = bands.filter((band) => holdsLine(band, line));
  const atField = bands.filter((band) => holdsField(band, field));
  const both = atLine.filter((band) => holdsField(band, field));
  const lineSpans = firstNotEmpty(both, atLine, atField, bands).map((band) => band.lineRateHz);
  const fieldSpans = firstNotEmpty(both, atLine, atField, bands).map((band) => band.fieldRateHz);
  const fieldInside = atLine.length > 0 ? both.length > 0 : atField.length > 0;
  return [
    rateVerdict({ rule: "line-rate", measured: line, spans: lineSpans, inside: atLine.length > 0 }),
    rateVerdict({ rule: "field-rate", measured: field, spans: fieldSpans, inside: fieldInside }),
  ];
}

function judgeInterlace(timing: RasterTiming, screen: ScreenEnvelope): EnvelopeVerdict {
  const measured = timing.interlaced ? 2 : 1;
  const base = { rule: "interlace", limit: "interlace", measured, unit: "fields" } as const;
  if (!timing.interlaced || screen.interlace === true) return { ...base, outcome: "inside" };
  if (screen.interlace === undefined) return { ...base, outcome: "unknown" };
  return { ...base, outcome: "outside", max: 1, nearest: 1 };
}

function judgeClock(timing: RasterTiming, screen: ScreenEnvelope): EnvelopeVerdict {
  const [measured, max] = [timing.pixelClockHz, screen.maxPixelClockHz];
  const base = { rule: "clock", limit: "maxPixelClockHz", measured, unit: "Hz" } as const;
  if (max === undefined) return { ...base, outcome: "unknown" };
  return atMost(measured, max)
    ? { ...base, outcome: "inside", max }
    : { ...base, outcome: "outside", max, nearest: max };
}

type LeastLimit = { rule: RasterRule; limit: EnvelopeLimit; measured: number; min: number | undefined };

/** The least whole count whose length reaches `min`; a count that misses it by the tolerance alone reaches it. */
function leastCount(min: number, lengthOfOne: number): number {
  return Math.ceil((min / lengthOfOne) * (1 - LIMIT_TOLERANCE));
}

function judgeLeast(
  { rule, limit, measured, min }: LeastLimit,
  countFor: (min: number) => EnvelopeVerdict["nearestCount"],
): EnvelopeVerdict {
  const base = { rule, limit, measured, unit: "µs" } as const;
  if (min === undefined) return { ...base, outcome: "unknown" };
  if (atLeast(measured, min)) return { ...base, outcome: "inside", min };
  return { ...base, outcome: "outside", min, nearest: min, nearestCount: countFor(min) };
}

function judgeBlankingLimits(timing: RasterTiming, screen: ScreenEnvelope): EnvelopeVerdict[] {
  const { sync, backPorch } = horizontalUs(timing);
  const clocks = (min: number) => ({ count: leastCount(min, 1e6 / timing.pixelClockHz), unit: "clocks" }) as const;
  const lines = (min: number) => {
    const half = fieldBlankLines(timing) % 1;
    return { count: Math.ceil((min / linePeriodUs(timing)) * (1 - LIMIT_TOLERANCE) - half), unit: "lines" } as const;
  };
  return [
    judgeLeast({ rule: "sync", limit: "minSyncUs", measured: sync, min: screen.minSyncUs }, clocks),
    judgeLeast(
      { rule: "back-porch", limit: "minBackPorchUs", measured: backPorch, min: screen.minBackPorchUs },
      clocks,
    ),
    judgeLeast(
      { rule: "field-blank", limit: "minFieldBlankUs", measured: fieldBlankUs(timing), min: screen.minFieldBlankUs },
      lines,
    ),
  ];
}

/**
 * Holds a raster against every limit of a screen, always all seven, in one order.
 *
 * Limits are inclusive to 1 part in 10⁶; what the screen does not name is `unknown`, never inside.
 * @param timing without `rasterProblems`
 */
export function judgeEnvelope(timing: RasterTiming, screen: ScreenEnvelope): EnvelopeVerdict[] {
  const verdicts = [
    ...judgeBands(timing, screen),
    judgeInterlace(timing, screen),
    judgeClock(timing, screen),
    ...judgeBlankingLimits(timing, screen),
  ];
  return verdicts.map((verdict) => {
    const source = screen.sources?.[verdict.limit];
    return source === undefined ? verdict : { ...verdict, source };
  });
}

/** No limit of the screen that is known is broken. An absent sync is not the screen's limit: see `judgeBlanking`. */
export function fitsEnvelope(timing: RasterTiming, screen: ScreenEnvelope): boolean {
  return judgeEnvelope(timing, screen).every(({ outcome }) => outcome !== "outside");
}
