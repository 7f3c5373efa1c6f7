import type { EnvelopeBand, Span } from "@/lib/timing/envelope";
import { spend, type Budget } from "@/lib/timing/fit/budget";
import type { Share } from "@/lib/timing/fit/allocate";
import { blankingGuide, type BlankingGuide } from "@/lib/timing/fit/reference";
import type { SearchSpace } from "@/lib/timing/fit/search-space";
import { blankingOrder, splitBlanking, stiffnessOf, type BlankingSplit } from "@/lib/timing/fit/split-blanking";
import { clamp, intersect, SLACK, slackened } from "@/lib/timing/fit/whole";

/** What one count of field lines leaves open in one band: its line rates, and how its blanking is split. */
export type FieldChoice = {
  readonly fieldLines: number;
  /** Half a line more where interlaced. */
  readonly linesPerField: number;
  readonly lineRate: Span;
  readonly aimRateHz: number;
  readonly guide: BlankingGuide;
  readonly down: BlankingSplit;
};

/** A wished line rate is met within this share of it. */
const LINE_RATE_TOLERANCE = 1e-4;

/**
 * The longest field blanking that a standard asks for is 85 lines (CTA-861 code 39), and where no standard speaks a
 * quarter more than 49: a search that is held to them ends here.
 */
const LONGEST_STANDARD_BLANK_LINES = 86;

const around = (value: number, share: number): Span => [value * (1 - share), value * (1 + share)];
const anything: Span = [0, Infinity];

function lineRates(space: SearchSpace, band: EnvelopeBand, linesPerField: number): Span {
  const { fieldRateHz, fieldRateTolerance, lineRateHz } = space;
  const wished = Number.isFinite(fieldRateTolerance) ? around(fieldRateHz, fieldRateTolerance) : anything;
  const field = intersect(wished, slackened(band.fieldRateHz));
  const blankLines = linesPerField - space.activeFieldLines;
  const fastest = space.minFieldBlankUs > 0 ? ((blankLines * 1e6) / space.minFieldBlankUs) * (1 + SLACK) : Infinity;
  const line = intersect(slackened(band.lineRateHz), [0, fastest]);
  const wishedLine = lineRateHz === undefined ? anything : around(lineRateHz, LINE_RATE_TOLERANCE);
  return intersect(intersect([field[0] * linesPerField, field[1] * linesPerField], line), wishedLine);
}

function splitDown(space: SearchSpace, guide: BlankingGuide, blankLines: number): BlankingSplit | undefined {
  const hold = space.standardDown;
  const [least, most] = guide.spanLines.blank;
  if (hold === "all" && (blankLines < least || blankLines > most)) return undefined;
  const shares = blankingOrder.map((part): Share => {
    const free: Span = [part === "sync" ? 1 : 0, blankLines];
    const device = space.verticalParts[part] ?? free;
    const held = hold === "all" || part === "sync";
    const [min, max] = intersect(intersect(free, device), held ? guide.spanLines[part] : free);
    return { aim: guide.aimLines[part], min: Math.ceil(min), max: Math.floor(max), stiffness: stiffnessOf(part) };
  });
  return splitBlanking(shares, blankLines);
}

/** Whether the screen's shortest sync and back porch are within what the standards allow: no clock mends it if not. */
function screenMeetsStandard(space: SearchSpace, { spanUs }: BlankingGuide): boolean {
  const { standardAcross: hold, minSyncUs, minBackPorchUs } = space;
  const sync = minSyncUs <= spanUs.sync[1] * (1 + SLACK);
  return sync && (hold === "sync" || minBackPorchUs <= spanUs.backPorch[1] * (1 + SLACK));
}

function fieldChoice(space: SearchSpace, band: EnvelopeBand, fieldLines: number): FieldChoice | undefined {
  const linesPerField = space.interlaced ? fieldLines + 0.5 : fieldLines;
  const lineRate = lineRates(space, band, linesPerField);
  if (!(lineRate[0] <= lineRate[1]) || lineRate[1] <= 0) return undefined;
  const aimRateHz = clamp(space.lineRateHz ?? space.fieldRateHz * linesPerField, lineRate);
  const guide = blankingGuide(aimRateHz, aimRateHz / linesPerField);
  if (!screenMeetsStandard(space, guide)) return undefined;
  const down = splitDown(space, guide, fieldLines - space.activeFieldLines);
  return down === undefined ? undefined : { fieldLines, linesPerField, lineRate, aimRateHz, guide, down };
}

/** No longer field has the slowest rate that is looked for at the fastest line rate of a band. */
function longestField({ bands, fieldRateHz, fieldRateTolerance }: SearchSpace): number {
  const slowest = Number.isFinite(fieldRateTolerance) ? fieldRateHz * (1 - fieldRateTolerance) : 0;
  return (
    Math.max(...bands.map((band) => band.lineRateHz[1] / Math.max(slowest, band.fieldRateHz[0]))) * (1 + 4 * SLACK)
  );
}

/** Every count of field lines that some band allows, shortest field first; ends where the budget does. */
export function* fieldChoices(space: SearchSpace, budget: Budget): Generator<FieldChoice> {
  const active = space.activeFieldLines;
  const [least, most] = space.verticalParts.active ?? anything;
  if (active < least || active > most) return;
  const longest = space.standardDown === "all" ? active + LONGEST_STANDARD_BLANK_LINES : Infinity;
  const first = Math.max(space.fieldLines ?? 0, active + 1);
  const last = Math.min(space.fieldLines ?? Infinity, space.maxFieldLines, longest, longestField(space));
  for (let fieldLines = first; fieldLines <= last; fieldLines += 1) {
    for (const band of space.bands) {
      if (!spend(budget)) return;
      const choice = fieldChoice(space, band, fieldLines);
      if (choice !== undefined) yield choice;
    }
  }
}
