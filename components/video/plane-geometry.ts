import { roundUp } from "@/components/video/ruler-geometry";
import type { EnvelopeBand, Span } from "@/lib/timing/envelope";

/** What a rate plane shows: line rate across, field rate up, both in Hz. */
export type PlaneDomain = { readonly lineRateHz: Span; readonly fieldRateHz: Span };

export type PlanePoint = { readonly lineRateHz: number; readonly fieldRateHz: number };

/** Room around what is shown, as a share of its width and height. */
const MARGIN = 0.12;
const LEAST_LINE_WIDTH_HZ = 600;
const LEAST_FIELD_HEIGHT_HZ = 6;
/** Only bands within this many times the nearest raster's rate widen the view, so that a far band does not squeeze it. */
const WIDEST_RATIO = 6;

function padded(values: readonly number[], least: number): Span {
  const [min, max] = [Math.min(...values), Math.max(...values)];
  const width = Math.max(max - min, least);
  const middle = (min + max) / 2;
  return [middle - width * (0.5 + MARGIN), middle + width * (0.5 + MARGIN)];
}

/** The view that holds all points and bands; undefined where there is neither. */
export function planeDomain(bands: readonly EnvelopeBand[], points: readonly PlanePoint[]): PlaneDomain | undefined {
  const slowest = Math.min(...points.map((point) => point.lineRateHz), ...bands.map((band) => band.lineRateHz[0]));
  const near = bands.filter((band) => points.length === 0 || band.lineRateHz[0] <= slowest * WIDEST_RATIO);
  const line = [...near.flatMap((band) => [...band.lineRateHz]), ...points.map((point) => point.lineRateHz)];
  const field = [...near.flatMap((band) => [...band.fieldRateHz]), ...points.map((point) => point.fieldRateHz)];
  if (line.length === 0) return undefined;
  return { lineRateHz: padded(line, LEAST_LINE_WIDTH_HZ), fieldRateHz: padded(field, LEAST_FIELD_HEIGHT_HZ) };
}

export type PlaneFrame = {
  readonly leftPx: number;
  readonly topPx: number;
  readonly widthPx: number;
  readonly heightPx: number;
};

export function xOf(lineRateHz: number, domain: PlaneDomain, frame: PlaneFrame): number {
  const [min, max] = domain.lineRateHz;
  return frame.leftPx + ((lineRateHz - min) / (max - min)) * frame.widthPx;
}

export function yOf(fieldRateHz: number, domain: PlaneDomain, frame: PlaneFrame): number {
  const [min, max] = domain.fieldRateHz;
  return frame.topPx + (1 - (fieldRateHz - min) / (max - min)) * frame.heightPx;
}

/** Round values within a span, `most` at most. */
export function planeTicks(span: Span, most: number): readonly number[] {
  const every = roundUp((span[1] - span[0]) / most);
  const first = Math.ceil(span[0] / every);
  const last = Math.floor(span[1] / every);
  return Array.from({ length: Math.max(0, last - first + 1) }, (_, index) => (first + index) * every);
}

export type RaySegment = { readonly from: PlanePoint; readonly to: PlanePoint };

/**
 * The stretch of a line count that is in view: field rate = line rate / lines.
 *
 * @param linesPerField 262, or 262.5 for one field of the 525-line pair
 */
export function raySegment(linesPerField: number, domain: PlaneDomain): RaySegment | undefined {
  const from = Math.max(domain.lineRateHz[0], domain.fieldRateHz[0] * linesPerField);
  const to = Math.min(domain.lineRateHz[1], domain.fieldRateHz[1] * linesPerField);
  if (from >= to) return undefined;
  const point = (lineRateHz: number): PlanePoint => ({ lineRateHz, fieldRateHz: lineRateHz / linesPerField });
  return { from: point(from), to: point(to) };
}

export type RayLabel = { readonly x: number; readonly y: number };

const LABEL_WIDTH_PX = 62;
const LABEL_HEIGHT_PX = 13;

/**
 * Places for the names of rays, right-aligned at their upper end, or a step further down the ray where another name
 * stands already. A ray without room for its name has none.
 *
 * Bound: 8 steps a ray.
 */
export function rayLabels(
  rays: readonly (RaySegment | undefined)[],
  domain: PlaneDomain,
  frame: PlaneFrame,
): readonly (RayLabel | undefined)[] {
  const placed: RayLabel[] = [];
  return rays.map((ray) => {
    if (ray === undefined) return undefined;
    for (let step = 0; step < 8; step += 1) {
      const share = 1 - step / 10;
      const lineRateHz = ray.from.lineRateHz + share * (ray.to.lineRateHz - ray.from.lineRateHz);
      const fieldRateHz = ray.from.fieldRateHz + share * (ray.to.fieldRateHz - ray.from.fieldRateHz);
      const label = {
        x: xOf(lineRateHz, domain, frame) - 5,
        y: Math.max(yOf(fieldRateHz, domain, frame) + 4, frame.topPx + 11),
      };
      const isInside = label.x - LABEL_WIDTH_PX >= frame.leftPx;
      const isFree = placed.every(
        (other) => Math.abs(other.x - label.x) >= LABEL_WIDTH_PX || Math.abs(other.y - label.y) >= LABEL_HEIGHT_PX,
      );
      if (isInside && isFree) {
        placed.push(label);
        return label;
      }
    }
    return undefined;
  });
}

/** Rasters near enough to a band to be worth showing with it: within a quarter of its line rates. */
export function nearBands<P extends PlanePoint>(points: readonly P[], bands: readonly EnvelopeBand[]): readonly P[] {
  if (bands.length === 0) return points;
  return points.filter(({ lineRateHz }) =>
    bands.some((band) => lineRateHz >= band.lineRateHz[0] * 0.75 && lineRateHz <= band.lineRateHz[1] * 1.25),
  );
}
