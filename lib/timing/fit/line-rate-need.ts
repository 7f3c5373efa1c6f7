import type { EnvelopeBand } from "@/lib/timing/envelope";
import type { FitRequest } from "@/lib/timing/fit/fit-types";
import { blankingGuide } from "@/lib/timing/fit/reference";
import { inSpan } from "@/lib/timing/span";
import { LIMIT_TOLERANCE } from "@/lib/timing/span";

/** Why a wish is too fast or too slow for a band, in lines: the sum that the owner can follow. */
export type LineRateNeed = {
  readonly side: "above" | "below";
  readonly neededHz: number;
  readonly limitHz: number;
  /** Lines in all (per field) and those of them that are blanking, at the limit. */
  readonly totalLines: number;
  readonly blankLines: number;
  readonly fieldRateAtLimitHz: number;
};

function needOfBand(request: FitRequest, band: EnvelopeBand): LineRateNeed | undefined {
  const { wish, screen } = request;
  const half = wish.interlaced ? 0.5 : 0;
  const active = wish.interlaced ? wish.activeLines / 2 : wish.activeLines;
  const [slowest, fastest] = band.lineRateHz;
  const need = (side: LineRateNeed["side"], limitHz: number, blankLines: number): LineRateNeed => {
    const totalLines = active + blankLines;
    const linesPerField = totalLines + half;
    const fieldRateAtLimitHz = limitHz / linesPerField;
    return { side, neededHz: wish.fieldRateHz * linesPerField, limitHz, totalLines, blankLines, fieldRateAtLimitHz };
  };
  const screenLines = ((screen.minFieldBlankUs ?? 0) * fastest) / 1e6 - half;
  const leastLines = Math.max(blankingGuide(fastest, wish.fieldRateHz).spanLines.blank[0], screenLines);
  const above = need("above", fastest, Math.ceil(leastLines * (1 - LIMIT_TOLERANCE)));
  if (above.neededHz > fastest) return above;
  const mostLines = Math.floor(blankingGuide(slowest, wish.fieldRateHz).spanLines.blank[1]);
  const below = need("below", slowest, mostLines);
  return below.neededHz < slowest ? below : undefined;
}

const shortfall = (need: LineRateNeed) => Math.abs(need.neededHz / need.limitHz - 1);

/**
 * The band that comes nearest to what a wish needs, and by how much it fails: with the fewest lines of blanking that
 * the standards and the screen allow at the band's fastest rate, or the most at its slowest.
 *
 * Undefined where some band could take the line rate.
 */
export function lineRateNeed(request: FitRequest): LineRateNeed | undefined {
  const { bands } = request.screen;
  const holding = bands.filter((band) => inSpan(request.wish.fieldRateHz, band.fieldRateHz));
  const needs = (holding.length > 0 ? holding : bands).map((band) => needOfBand(request, band));
  if (needs.some((need) => need === undefined)) return undefined;
  return needs.reduce<LineRateNeed | undefined>(
    (best, need) => (need !== undefined && (best === undefined || shortfall(need) < shortfall(best)) ? need : best),
    undefined,
  );
}
