import { SEARCH_TRIES, spend, type Budget } from "@/lib/timing/fit/budget";
import { fieldChoices, type FieldChoice } from "@/lib/timing/fit/search-fields";
import { clocksFor, leastAcrossCost, lineTotals, splitAcross } from "@/lib/timing/fit/search-lines";
import type { SearchSpace } from "@/lib/timing/fit/search-space";
import type { Blanking } from "@/lib/timing/fit/split-blanking";
import type { RasterTiming } from "@/lib/timing/raster";

/** A raster that a search found, with what it is ranked by. */
export type Found = {
  readonly timing: RasterTiming;
  readonly fieldRateHz: number;
  /** Signed: what comes out less what was wished. */
  readonly rateErrorHz: number;
  readonly porchCost: number;
};

/** Rate errors that differ by less are alike, and the porches decide: a frame slips after 1 000 s at the soonest. */
const ALIKE_HZ = 0.001;

/** Costs of one split at two clocks differ in the last bits alone. */
const ALIKE_COST = 1e-9;

/** Rank of a rate error: whole steps of 0.001 Hz. */
export function rateRank(rateErrorHz: number): number {
  return Math.round(Math.abs(rateErrorHz) / ALIKE_HZ);
}

/**
 * Order of fitted rasters: by rate error in steps of 0.001 Hz, then by how far the porches are from the standard's,
 * then by the rate error itself, then the lower clock first.
 */
export function compareFound(a: Found, b: Found): number {
  const rank = rateRank(a.rateErrorHz) - rateRank(b.rateErrorHz);
  if (rank !== 0) return rank;
  const cost = a.porchCost - b.porchCost;
  if (Math.abs(cost) > ALIKE_COST) return cost;
  return Math.abs(a.rateErrorHz) - Math.abs(b.rateErrorHz) || a.timing.pixelClockHz - b.timing.pixelClockHz;
}

function rasterOf(space: SearchSpace, field: FieldChoice, pixelClockHz: number, across: Blanking): RasterTiming {
  const { polarity } = field.guide;
  return {
    pixelClockHz,
    interlaced: space.interlaced,
    horizontal: { active: space.activePx, ...across, polarity },
    vertical: { active: space.activeFieldLines, ...field.down.blanking, polarity },
  };
}

/** The best raster of one line total that comes before `toBeat`; `toBeat` itself where there is none. */
function bestOfLine(
  space: SearchSpace,
  field: FieldChoice,
  lineTotal: number,
  { toBeat, budget }: { toBeat: Found | undefined; budget: Budget },
): Found | undefined {
  const leastCost = field.down.cost + leastAcrossCost(space, field, lineTotal);
  const rankToBeat = toBeat === undefined ? Infinity : rateRank(toBeat.rateErrorHz);
  const costToBeat = toBeat === undefined ? Infinity : toBeat.porchCost + ALIKE_COST;
  let best = toBeat;
  let rankFound = Infinity;
  for (const pixelClockHz of clocksFor(space, field, lineTotal)) {
    const fieldRateHz = pixelClockHz / (lineTotal * field.linesPerField);
    const rateErrorHz = fieldRateHz - space.fieldRateHz;
    const rank = rateRank(rateErrorHz);
    if (rank > rankFound || rank > rankToBeat || (rank === rankToBeat && leastCost > costToBeat)) break;
    if (!spend(budget)) break;
    const across = splitAcross(space, field, lineTotal, pixelClockHz);
    if (across === undefined) continue;
    rankFound = rank;
    const timing = rasterOf(space, field, pixelClockHz, across.blanking);
    const found: Found = { timing, fieldRateHz, rateErrorHz, porchCost: across.cost + field.down.cost };
    if (best === undefined || compareFound(found, best) < 0) best = found;
    // Clocks come nearest first and change a split through its ends alone, so no later one is better.
    if (across.unbound) break;
  }
  return best;
}

function usable(space: SearchSpace): boolean {
  const [least, most] = space.horizontalParts.active ?? [0, Infinity];
  const { activePx, multiple, activeFieldLines } = space;
  return (
    !space.barred &&
    activePx >= least &&
    activePx <= most &&
    activePx % multiple === 0 &&
    Number.isInteger(activeFieldLines)
  );
}

/** Line totals come by falling nearness to the standard: with no rate error left, one that costs more ends the search. */
function settled(space: SearchSpace, field: FieldChoice, lineTotal: number, best: Found): boolean {
  const leastCost = field.down.cost + leastAcrossCost(space, field, lineTotal);
  return rateRank(best.rateErrorHz) === 0 && leastCost > best.porchCost + ALIKE_COST;
}

/**
 * The best raster for each count of field lines, best first.
 *
 * Exact within the space: no other raster of the same field lines comes before it in `compareFound`, as long as the
 * first 64 clocks of the device's grid about the wished rate hold one that fits, if any does, and the budget lasts.
 */
export function search(space: SearchSpace, budget: Budget = { left: SEARCH_TRIES }): Found[] {
  if (!usable(space)) return [];
  const byFieldLines = new Map<number, Found>();
  for (const field of fieldChoices(space, budget)) {
    let best = byFieldLines.get(field.fieldLines);
    for (const lineTotal of lineTotals(space, field)) {
      if (!spend(budget) || (best !== undefined && settled(space, field, lineTotal, best))) break;
      best = bestOfLine(space, field, lineTotal, { toBeat: best, budget });
    }
    if (best !== undefined) byFieldLines.set(field.fieldLines, best);
  }
  return [...byFieldLines.values()].sort(compareFound);
}

/** The first raster that a space is found to hold, not the best; undefined where there is none or the budget ends. */
export function firstRaster(space: SearchSpace, budget: Budget = { left: SEARCH_TRIES }): Found | undefined {
  if (!usable(space)) return undefined;
  for (const field of fieldChoices(space, budget)) {
    for (const lineTotal of lineTotals(space, field)) {
      if (!spend(budget)) return undefined;
      const found = bestOfLine(space, field, lineTotal, { toBeat: undefined, budget });
      if (found !== undefined) return found;
    }
  }
  return undefined;
}

/** Whether a space holds any raster: ends at the first. */
export function holdsRaster(space: SearchSpace, budget: Budget = { left: SEARCH_TRIES }): boolean {
  return firstRaster(space, budget) !== undefined;
}
