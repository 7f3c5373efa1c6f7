import type { Span } from "@/lib/timing/envelope";
import type { Share } from "@/lib/timing/fit/allocate";
import type { FieldChoice } from "@/lib/timing/fit/search-fields";
import type { SearchSpace } from "@/lib/timing/fit/search-space";
import { blankingOrder, splitBlanking, stiffnessOf, type BlankingSplit } from "@/lib/timing/fit/split-blanking";
import { atLeastWhole, atMostWhole, clamp, intersect, slackened } from "@/lib/timing/fit/whole";

/** Clocks of the device's grid that are tried for one line total, nearest first. */
const MAX_CLOCKS_TRIED = 64;

/** A line has no more blanking than this, whatever is left open: four times its picture, and 4 096 clocks. */
const longestLine = (activePx: number) => 4 * activePx + 4096;

function lineTotalSpan(space: SearchSpace, field: FieldChoice): Span {
  const { activePx, clock, pixelClockHz } = space;
  const [slowest, fastest] = field.lineRate;
  const [shortest, longest] = field.guide.spanUs.blank;
  let span: Span = [activePx + 1, Math.min(space.maxLineTotal, longestLine(activePx))];
  if (space.standardAcross === "all") {
    // Picture and blanking share the line: H = active + H · blank · rate.
    const [most, least] = [1 - (shortest * slowest) / 1e6, 1 - (longest * fastest) / 1e6];
    if (most > 0) span = intersect(span, [activePx / most - space.multiple, Infinity]);
    if (least > 0) span = intersect(span, [0, activePx / least + space.multiple]);
  }
  const [minHz, maxHz] =
    pixelClockHz === undefined ? slackened([clock.minHz, clock.maxHz]) : [pixelClockHz, pixelClockHz];
  if (Number.isFinite(fastest)) span = intersect(span, [minHz / fastest, Infinity]);
  if (slowest > 0) span = intersect(span, [0, maxHz / slowest]);
  return space.lineTotal === undefined ? span : intersect(span, [space.lineTotal, space.lineTotal]);
}

/**
 * Line totals worth trying, those first whose blanking is nearest to the standard's: the best is found early, and
 * what cannot be better is left out by `leastAcrossCost`.
 */
export function* lineTotals(space: SearchSpace, field: FieldChoice): Generator<number> {
  const { multiple } = space;
  const span = lineTotalSpan(space, field);
  const [first, last] = [Math.ceil(atLeastWhole(span[0]) / multiple), Math.floor(atMostWhole(span[1]) / multiple)];
  if (!(first <= last)) return;
  const { frontPorch, sync, backPorch } = field.guide.aimUs;
  const share = ((frontPorch + sync + backPorch) * field.aimRateHz) / 1e6;
  const ideal = space.activePx / (1 - Math.min(share, 0.9)) / multiple;
  let down = Math.min(Math.floor(ideal), last);
  let up = Math.max(down + 1, first);
  while (down >= first || up <= last) {
    const takeDown = down >= first && (up > last || ideal - down <= up - ideal);
    yield (takeDown ? down : up) * multiple;
    if (takeDown) down -= 1;
    else up += 1;
  }
}

/** Aims of the three parts in units of the multiple: a share of the line, so that all clocks of the grid have one aim. */
function aimsAcross(space: SearchSpace, field: FieldChoice, lineTotal: number): number[] {
  const perUs = (lineTotal * field.aimRateHz) / 1e6 / space.multiple;
  return blankingOrder.map((part) => field.guide.aimUs[part] * perUs);
}

/** No split of this line total costs less: the least sum of squares whose deviations add up to what is left over. */
export function leastAcrossCost(space: SearchSpace, field: FieldChoice, lineTotal: number): number {
  const aims = aimsAcross(space, field, lineTotal);
  const sum = aims.reduce((total, aim) => total + aim, 0);
  const give = aims.reduce((total, aim, index) => total + aim / stiffnessOf(blankingOrder[index] ?? "sync"), 0);
  const rest = (lineTotal - space.activePx) / space.multiple - sum;
  return rest ** 2 / give / sum;
}

/** What one clock leaves of a line: whether its blanking is too short or too long, and what each part may be. */
type AcrossChoice = { readonly tooShort: boolean; readonly tooLong: boolean; readonly shares: readonly Share[] };

function acrossChoice(space: SearchSpace, field: FieldChoice, lineTotal: number, clockHz: number): AcrossChoice {
  const { multiple, standardAcross: hold } = space;
  const { spanUs } = field.guide;
  const blank = lineTotal - space.activePx;
  const perUs = clockHz / 1e6;
  const [least, most] = hold === "all" ? slackened([spanUs.blank[0] * perUs, spanUs.blank[1] * perUs]) : [0, Infinity];
  const aims = aimsAcross(space, field, lineTotal);
  const leastUs = { frontPorch: 0, sync: space.minSyncUs, backPorch: space.minBackPorchUs };
  const shares = blankingOrder.map((part, index): Share => {
    const device = space.horizontalParts[part] ?? [0, Infinity];
    const held = hold === "all" || part === "sync";
    const standard = held ? spanUs[part] : ([0, Infinity] as const);
    const min = Math.max(device[0], leastUs[part] * perUs, standard[0] * perUs, part === "sync" ? 1 : 0);
    const max = Math.min(device[1], standard[1] * perUs, blank);
    return {
      aim: aims[index] ?? 0,
      min: atLeastWhole(min / multiple),
      max: atMostWhole(max / multiple),
      stiffness: stiffnessOf(part),
    };
  });
  return { tooShort: blank < least, tooLong: blank > most, shares };
}

/** Splits the clocks of the line blanking at one clock; the cost depends on the clock through its bounds alone. */
export function splitAcross(
  space: SearchSpace,
  field: FieldChoice,
  lineTotal: number,
  clockHz: number,
): BlankingSplit | undefined {
  const { multiple } = space;
  const { tooShort, tooLong, shares } = acrossChoice(space, field, lineTotal, clockHz);
  if (tooShort || tooLong) return undefined;
  const split = splitBlanking(shares, (lineTotal - space.activePx) / multiple);
  if (split === undefined || multiple === 1) return split;
  const { frontPorch, sync, backPorch } = split.blanking;
  const blanking = { frontPorch: frontPorch * multiple, sync: sync * multiple, backPorch: backPorch * multiple };
  return { ...split, blanking };
}

/** Whether all clocks between two split a line alike: each of its bounds only rises with the clock. */
function splitsAlike(space: SearchSpace, field: FieldChoice, lineTotal: number, [low, high]: Span): boolean {
  const [a, b] = [acrossChoice(space, field, lineTotal, low), acrossChoice(space, field, lineTotal, high)];
  if (a.tooShort !== b.tooShort || a.tooLong !== b.tooLong) return false;
  return a.shares.every((share, index) => share.min === b.shares[index]?.min && share.max === b.shares[index].max);
}

/** Whether some whole sync lies within its limits at some clock of the span: at a coarse clock there may be none. */
function holdsSync(space: SearchSpace, field: FieldChoice, [minHz, maxHz]: Span): boolean {
  const [least, most] = field.guide.spanUs.sync;
  const shortest = atLeastWhole((Math.max(least, space.minSyncUs) * minHz) / 1e6 / space.multiple);
  return shortest <= atMostWhole((most * maxHz) / 1e6 / space.multiple);
}

/**
 * Clocks of the grid for a line total that its field allows, nearest to the wished rate first, at most 64; the nearest
 * alone where all of them split the line alike.
 */
export function* clocksFor(space: SearchSpace, field: FieldChoice, lineTotal: number): Generator<number> {
  const { stepHz, anchorHz } = space.clock;
  const allowed = slackened([space.clock.minHz, space.clock.maxHz]);
  const span = intersect([field.lineRate[0] * lineTotal, field.lineRate[1] * lineTotal], allowed);
  if (!holdsSync(space, field, span)) return;
  const steps = (hz: number) => (hz - anchorHz) / stepHz;
  if (space.pixelClockHz !== undefined) {
    const onGrid = anchorHz + Math.round(steps(space.pixelClockHz)) * stepHz;
    const isOn = Math.abs(onGrid - space.pixelClockHz) < 0.5;
    if (isOn && space.pixelClockHz >= span[0] && space.pixelClockHz <= span[1]) yield space.pixelClockHz;
    return;
  }
  const [low, high] = [Math.ceil(steps(span[0]) - 1e-9), Math.floor(steps(span[1]) + 1e-9)];
  if (!(low <= high)) return;
  const aim = steps(clamp(space.fieldRateHz * field.linesPerField * lineTotal, span));
  let down = Math.min(Math.floor(aim), high);
  let up = Math.max(down + 1, low);
  const ends: Span = [Math.max(low, down - MAX_CLOCKS_TRIED), Math.min(high, up + MAX_CLOCKS_TRIED)];
  const alike = splitsAlike(space, field, lineTotal, [anchorHz + ends[0] * stepHz, anchorHz + ends[1] * stepHz]);
  const most = alike ? 1 : MAX_CLOCKS_TRIED;
  for (let tried = 0; tried < most && (down >= low || up <= high); tried += 1) {
    const takeDown = down >= low && (up > high || aim - down <= up - aim);
    yield anchorHz + (takeDown ? down : up) * stepHz;
    if (takeDown) down -= 1;
    else up += 1;
  }
}
