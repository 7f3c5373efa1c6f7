/**
 * How much a search may still try: counts of field lines, line totals and clocks, a few µs each.
 *
 * A sane request takes a few thousand; the bound is for one that is made to take for ever.
 */
export type Budget = { left: number };

/**
 * Tries for one answer: the search itself; the reasons when nothing fits (each alone, then all together); the examples
 * that their figures are taken from; the nearest. The hardest of 7 680 requests that somebody could mean took 4 541.
 */
export const SEARCH_TRIES = 16_000;
export const REASON_TRIES = 24_000;
export const EXAMPLE_TRIES = 16_000;
export const NEAREST_TRIES = 24_000;

/** Takes one try; false where none is left. */
export function spend(budget: Budget): boolean {
  budget.left -= 1;
  return budget.left >= 0;
}
