import { ctaCatalogue } from "@/lib/timing/catalogue/catalogue";
import { analogBackPorchUs, analogSystems, type AnalogSystem } from "@/lib/timing/catalogue/analog-systems";
import type { Span } from "@/lib/timing/envelope";
import type { RasterTiming } from "@/lib/timing/raster";
import { axisBlank, fieldBlankLines, fieldRateHz, horizontalUs, lineRateHz } from "@/lib/timing/rates";

/** Spans of the parts of blanking on one axis; `blank` is all three together. */
export type BlankingSpans = {
  readonly frontPorch: Span;
  readonly sync: Span;
  readonly backPorch: Span;
  readonly blank: Span;
};

/** What the published rasters of one line rate span together. */
export type BlankingSpan = {
  readonly horizontalUs: BlankingSpans;
  readonly verticalLines: BlankingSpans;
  /** The rasters that were taken together ("BT.470 525/60", "CTA-861 code 8"). */
  readonly from: readonly string[];
};

/** How far a line rate may lie from a published one and still be of its kind. Ours, no source. */
const LINE_RATE_KINSHIP = 0.03;

/** CTA-861's 24, 25 and 30 Hz formats are for panels: no CRT is scanned so slowly, so they say nothing about one. */
const SLOWEST_CRT_FIELD_HZ = 45;

type Sample = { readonly name: string; readonly lineRateHz: number } & Omit<BlankingSpan, "from">;

const point = (value: number): Span => [value, value];

function sampleOfTiming(name: string, timing: RasterTiming): Sample {
  const us = horizontalUs(timing);
  const { frontPorch, sync, backPorch } = timing.vertical;
  // An interlaced field has half a line more, before its sync or after it: both ends are within the standard.
  const half = fieldBlankLines(timing) - axisBlank(timing.vertical);
  return {
    name,
    lineRateHz: lineRateHz(timing),
    horizontalUs: {
      frontPorch: point(us.frontPorch),
      sync: point(us.sync),
      backPorch: point(us.backPorch),
      blank: point(us.frontPorch + us.sync + us.backPorch),
    },
    verticalLines: {
      frontPorch: [frontPorch, frontPorch + half],
      sync: point(sync),
      backPorch: [backPorch, backPorch + half],
      blank: [axisBlank(timing.vertical), fieldBlankLines(timing)],
    },
  };
}

function sampleOfSystem(system: AnalogSystem): Sample {
  const blank = system.fieldBlankLines;
  const before = system.equalisingLines + system.fieldSyncLines;
  return {
    name: `BT.470 ${system.name}`,
    lineRateHz: system.lineRateHz,
    horizontalUs: {
      frontPorch: system.frontPorchUs,
      sync: system.syncUs,
      backPorch: analogBackPorchUs(system),
      blank: system.lineBlankUs,
    },
    verticalLines: {
      frontPorch: point(system.equalisingLines),
      sync: point(system.fieldSyncLines),
      backPorch: [blank[0] - before, blank[1] - before],
      blank,
    },
  };
}

const samples: readonly Sample[] = [
  ...analogSystems.map(sampleOfSystem),
  ...ctaCatalogue
    .filter((entry) => fieldRateHz(entry.timing) >= SLOWEST_CRT_FIELD_HZ)
    .map((entry) => sampleOfTiming(`CTA-861 code ${entry.code}`, entry.timing)),
].sort((a, b) => a.lineRateHz - b.lineRateHz);

function union(spans: readonly Span[]): Span {
  return [Math.min(...spans.map(([min]) => min)), Math.max(...spans.map(([, max]) => max))];
}

function unionOf(axes: readonly BlankingSpans[]): BlankingSpans {
  return {
    frontPorch: union(axes.map((axis) => axis.frontPorch)),
    sync: union(axes.map((axis) => axis.sync)),
    backPorch: union(axes.map((axis) => axis.backPorch)),
    blank: union(axes.map((axis) => axis.blank)),
  };
}

function spanOfKin(kin: readonly Sample[]): BlankingSpan {
  return {
    horizontalUs: unionOf(kin.map((sample) => sample.horizontalUs)),
    verticalLines: unionOf(kin.map((sample) => sample.verticalLines)),
    from: [...new Set(kin.map((sample) => sample.name))],
  };
}

/** Kin are neighbours in the sorted samples, so there are few sets of them: each is put together once. */
const spansOfKin = new Map<number, BlankingSpan>();

/**
 * What BT.470 and the CTA-861 rasters within 3 % of a line rate span together.
 *
 * @param rateHz line rate
 * @returns horizontal parts in µs and vertical parts in lines; undefined where no such raster is published,
 * which means that nothing can be said, not that anything goes.
 */
export function blankingSpan(rateHz: number): BlankingSpan | undefined {
  const isKin = (sample: Sample) => Math.abs(rateHz / sample.lineRateHz - 1) <= LINE_RATE_KINSHIP;
  const first = samples.findIndex(isKin);
  if (first < 0) return undefined;
  const last = samples.findLastIndex(isKin);
  const key = first * samples.length + last;
  const known = spansOfKin.get(key);
  if (known !== undefined) return known;
  const span = spanOfKin(samples.slice(first, last + 1));
  spansOfKin.set(key, span);
  return span;
}
