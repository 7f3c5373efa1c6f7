import type { Span } from "@/lib/timing/envelope";
import type { FitRequest, FitWish } from "@/lib/timing/fit/fit-types";
import { blankingGuide } from "@/lib/timing/fit/reference";
import { FIELD_RATE_TOLERANCE, MAX_FIELD_LINES } from "@/lib/timing/fit/search-space";

/** Wishes tried on each side before we stop looking there. */
const MAX_TRIES = 24;

/**
 * Counts of field lines that are looked at in all, and on each side of the picture's in each band: more than any
 * blanking is long.
 */
const MAX_FIELDS_LOOKED_AT = 256;

/** The counts from `first` to `last` that lie nearest to `active`: where there are many, not all of them. */
function nearestCounts(active: number, first: number, last: number): number[] {
  const from = Math.max(first, Math.min(Math.floor(active) - MAX_FIELDS_LOOKED_AT, last - MAX_FIELDS_LOOKED_AT));
  const to = Math.min(last, Math.max(Math.ceil(active) + MAX_FIELDS_LOOKED_AT, first + MAX_FIELDS_LOOKED_AT));
  return Array.from({ length: to - from + 1 }, (_, index) => from + index);
}

/** Line rates and counts of field lines at which some band holds the wished field rate, or one within the tolerance of it. */
function fieldsAtRate({ wish, screen }: FitRequest, tolerance: number): { fieldLines: number; lineRateHz: number }[] {
  const half = wish.interlaced ? 0.5 : 0;
  const active = wish.interlaced ? wish.activeLines / 2 : wish.activeLines;
  return screen.bands.flatMap((band) => {
    const [slow, fast]: Span = [
      Math.max(wish.fieldRateHz * (1 - tolerance), band.fieldRateHz[0]),
      Math.min(wish.fieldRateHz * (1 + tolerance), band.fieldRateHz[1]),
    ];
    if (!(slow <= fast)) return [];
    const first = Math.max(1, Math.ceil(band.lineRateHz[0] / fast - half));
    const last = Math.min(MAX_FIELD_LINES, Math.floor(band.lineRateHz[1] / slow - half));
    if (!(first <= last)) return [];
    return nearestCounts(active, first, last).map((fieldLines) => {
      const lineRateHz = Math.min(
        Math.max(wish.fieldRateHz * (fieldLines + half), band.lineRateHz[0]),
        band.lineRateHz[1],
      );
      return { fieldLines, lineRateHz };
    });
  });
}

/** Wishes for fewer or more picture lines at the same rate, nearest first: those whose blanking a standard has. */
export function nearbyLines(request: FitRequest, side: "fewer" | "more"): FitWish[] {
  const { wish } = request;
  const perField = wish.interlaced ? 2 : 1;
  const exactly = fieldsAtRate(request, 0);
  const fields = exactly.length > 0 ? exactly : fieldsAtRate(request, FIELD_RATE_TOLERANCE);
  const active = wish.activeLines / perField;
  const near = fields
    .sort((a, b) => Math.abs(a.fieldLines - active) - Math.abs(b.fieldLines - active))
    .slice(0, MAX_FIELDS_LOOKED_AT);
  const counts = near.flatMap(({ fieldLines, lineRateHz }) => {
    const [least, most] = blankingGuide(lineRateHz, wish.fieldRateHz).spanLines.blank;
    const [fewest, highest] = [fieldLines - Math.floor(most), fieldLines - Math.ceil(least)];
    return Array.from({ length: Math.max(0, highest - fewest + 1) }, (_, index) => (fewest + index) * perField);
  });
  const onSide = (lines: number) =>
    lines > 0 && (side === "fewer" ? lines < wish.activeLines : lines > wish.activeLines);
  return [...new Set(counts.filter(onSide))]
    .sort((a, b) => Math.abs(a - wish.activeLines) - Math.abs(b - wish.activeLines))
    .slice(0, MAX_TRIES)
    .map((activeLines) => ({ ...wish, activeLines }));
}

/** Wishes for another width, nearest first: the multiples of the device, and what its clocks leave for a picture. */
export function nearbyWidths(request: FitRequest): FitWish[] {
  const { wish, device, screen } = request;
  const multiple = device?.horizontalMultiple ?? 1;
  const half = wish.interlaced ? 0.5 : 0;
  const fastest = Math.min(device?.clockHz?.max ?? Infinity, screen.maxPixelClockHz ?? Infinity);
  const slowest = device?.clockHz?.min ?? 0;
  const active = wish.interlaced ? wish.activeLines / 2 : wish.activeLines;
  const near = [0, 1, -1, 2, -2].map((step) => (Math.round(wish.activePx / multiple) + step) * multiple);
  const byClock = fieldsAtRate(request, FIELD_RATE_TOLERANCE)
    .filter(({ fieldLines }) => fieldLines > active)
    .sort((a, b) => a.fieldLines - b.fieldLines)
    .slice(0, MAX_FIELDS_LOOKED_AT)
    .flatMap(({ fieldLines, lineRateHz }) => {
      const rate = wish.fieldRateHz * (fieldLines + half);
      const [shortest, longest] = blankingGuide(lineRateHz, wish.fieldRateHz).spanUs.blank;
      const widest = Math.floor((fastest * (1 / rate - shortest / 1e6)) / multiple);
      const narrowest = Math.ceil((slowest * (1 / rate - longest / 1e6)) / multiple);
      return [widest - 1, widest, narrowest, narrowest + 1].map((count) => count * multiple);
    });
  return [...new Set([...near, ...byClock])]
    .filter((px) => Number.isFinite(px) && px > 0 && px !== wish.activePx)
    .sort((a, b) => Math.abs(a - wish.activePx) - Math.abs(b - wish.activePx))
    .slice(0, MAX_TRIES)
    .map((activePx) => ({ ...wish, activePx }));
}
