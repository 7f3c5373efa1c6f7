import type { Candidate, ModesAnswer } from "@/components/modes/store/answer";
import { figureText, figureWithUnit, figureWords } from "@/components/modes/store/figure-words";
import { formatClock, formatFieldRate, formatFigure, formatLineRate, formatNumber } from "@/components/ui/figures";
import { slipText } from "@/lib/profile/slip-remedies";
import { isExact, type ClockSteps } from "@/lib/timing/clock-steps";
import type { EnvelopeVerdict, RasterRule } from "@/lib/timing/judge-envelope";
import { judgeEnvelope } from "@/lib/timing/judge-envelope";
import { judgeBlanking, type BlankingPart } from "@/lib/timing/judge-blanking";
import type { EditFigure } from "@/lib/timing/fit/editable-figures";
import type { FigureChange, FitBlock } from "@/lib/timing/fit/fit-types";
import { standardWords, publishedAs } from "@/lib/timing/fit/fitted-raster";
import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";
import { activeFrameLines, fieldRateHz, linesPerField, lineTotal } from "@/lib/timing/rates";
import { rateSlip } from "@/lib/timing/slip/rate-slip";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { listText } from "@/lib/profile/words";

/** "1 920 × 1 080, 60.00 Hz" */
export function sourceWords({ activePx, activeLines, interlaced, fieldRateHz: rate }: SourceFormat): string {
  return `${activePx} × ${activeLines}${interlaced ? " interlaced" : ""}, ${figureText("fieldRateHz", rate)} Hz`;
}

/** "244 lines, 60.02 Hz" */
export function rasterWords(timing: RasterTiming): string {
  const scan = timing.interlaced ? ", interlaced" : "";
  return `${formatNumber(activeFrameLines(timing))} lines${scan}, ${formatFieldRate(fieldRateHz(timing))}`;
}

/** How the source's lines fall on those of a raster: "4.5 : 1", and whether that is a whole number. */
export function ratioWords(
  timing: RasterTiming,
  source: SourceFormat,
): { readonly ratio: string; readonly isWhole: boolean } {
  const lines = activeFrameLines(timing);
  const [many, few] = [Math.max(source.activeLines, lines), Math.min(source.activeLines, lines)];
  const figure = formatNumber(many / few, { decimalsAtMost: 2 });
  return { ratio: source.activeLines >= lines ? `${figure} : 1` : `1 : ${figure}`, isWhole: many % few === 0 };
}

/** What becomes of the frames: "repeats every 52 s". */
export function frameWords(timing: RasterTiming, source: SourceFormat, follows: boolean): string {
  if (follows) return "follows the source";
  const slip = rateSlip(source.fieldRateHz, fieldRateHz(timing));
  return slip.everyS === undefined ? "none lost" : slipText(slip);
}

const comparatives: Readonly<Partial<Record<FigureChange["figure"], readonly [less: string, more: string]>>> = {
  activeLines: ["fewer", "more"],
  fieldRateHz: ["slower", "faster"],
  activePx: ["narrower", "wider"],
};

function changeWords({ figure, from, to }: FigureChange): string {
  if (figure === "interlaced") return to === true ? "interlaced" : "progressive";
  const words = comparatives[figure];
  if (words === undefined) return `${figureWords[figure].label.toLowerCase()} ${figureWithUnit(figure, Number(to))}`;
  const by = Number(to) - Number(from);
  return `${figureWithUnit(figure, Math.abs(by))} ${by < 0 ? words[0] : words[1]}`;
}

/** What a candidate gives up of the wish, and which standard it is. */
export function candidateNotes({ changed, timing }: Candidate): readonly string[] {
  const given = changed.map((change) => `${changeWords(change)}${change.kept ? " (kept)" : ""}`);
  const published = publishedAs(timing);
  return [
    ...(given.length === 0 ? [] : [given.join("; ")]),
    ...(published === undefined ? [] : [standardWords(published)]),
  ];
}

const partWords: Readonly<Record<BlankingPart, string>> = {
  frontPorch: "front porch",
  sync: "sync",
  backPorch: "back porch",
  blank: "blanking",
};

/** The first part of blanking that no standard of the line rate has so: "line blanking of 9.81 µs". */
export function blankingCaution({ timing }: Candidate): string | null {
  const outside = judgeBlanking(timing).filter(({ outcome }) => outcome !== "inside");
  const [first] = outside;
  if (first === undefined) return null;
  const name = `${first.axis === "horizontal" ? "line" : "field"} ${partWords[first.part]}`;
  const rest = outside.length === 1 ? "" : `, and ${outside.length - 1} more`;
  return `${name} of ${formatFigure(first.measured, first.unit, { decimalsAtMost: 2 })}${rest}`;
}

const places = {
  screen: "this screen",
  device: "this device",
  standard: "the standards’ blanking",
  wish: "what you keep",
} as const;

function placeOf({ constraint }: FitBlock): keyof typeof places {
  if (constraint.startsWith("screen")) return "screen";
  if (constraint.startsWith("device")) return "device";
  return constraint.startsWith("standard") ? "standard" : "wish";
}

/** "270 lines at 60 Hz don’t fit this screen." */
export function noneFitsTitle({ request, outcome }: ModesAnswer): string {
  const { wish } = request;
  const found = [...new Set(outcome.blockedBy.map(placeOf))];
  const where = found.includes("screen")
    ? places.screen
    : ((found[0] && places[found[0]]) ?? "any raster that is known here");
  const scan = wish.interlaced ? " interlaced" : "";
  return `${formatNumber(wish.activeLines)} lines${scan} at ${formatNumber(wish.fieldRateHz)} Hz don’t fit ${where}.`;
}

/** What is in the way, the line rate first. */
export function blocksInOrder(blocks: readonly FitBlock[]): readonly FitBlock[] {
  const rank = ({ constraint }: FitBlock) => (constraint === "screen-line-rate" ? 0 : 1);
  return [...blocks].sort((a, b) => rank(a) - rank(b));
}

/** What the finest steps of the clock do, and what would meet the refresh: one sentence each. */
export function clockSentences(
  timing: RasterTiming,
  clock: ClockSteps,
  wishedHz: number,
  follows: boolean,
): readonly string[] {
  const more = clock.clocks === 1 ? "one clock more" : `${clock.clocks} clocks more, the least of this device,`;
  const first =
    `At ${formatClock(timing.pixelClockHz)} ${more} in a line makes the line rate ${formatFigure(clock.lineStepHz, "Hz", { decimalsAtMost: 1 })} ` +
    `and the refresh ${formatFigure(clock.fieldStepHz, "Hz", { decimals: 3 })} slower.`;
  if (follows) return [first, "This device’s output follows its input, so the refresh is the source’s."];
  const totals = `${formatNumber(lineTotal(timing))} clocks by ${formatNumber(linesPerField(timing))} lines`;
  const wished = formatFigure(wishedHz, "Hz");
  if (isExact(clock)) return [first, `${formatClock(clock.nearestClockHz)} meets ${wished} exactly with ${totals}.`];
  const exact = `To meet ${wished} exactly with ${totals} the clock would have to be ${formatFigure(clock.exactClockHz / 1e6, "MHz", { decimalsAtMost: 4 })}`;
  if (clock.clockStepHz === undefined) return [first, `${exact}.`];
  const step = formatFigure(clock.clockStepHz / 1e6, "MHz", { decimalsAtMost: 3 });
  return [
    first,
    `${exact}; this device steps by ${step}. Its nearest, ${formatClock(clock.nearestClockHz)}, gives ${formatFigure(clock.nearestFieldHz, "Hz", { decimals: 3 })}.`,
  ];
}

const unknownWords: Readonly<Record<RasterRule, string>> = {
  "line-rate": "line rates",
  "field-rate": "field rates",
  interlace: "word on interlace",
  clock: "pixel clock limit",
  sync: "shortest sync",
  "back-porch": "shortest back porch",
  "field-blank": "shortest field blanking",
};

export type Verdict = { readonly isInside: boolean; readonly words: string };

/** What the foot of the page says of the raster in hand. */
export function verdictOf({ findings, hand }: ModesAnswer, screen: ScreenEnvelope): Verdict | null {
  if (hand === null) return null;
  const stops = findings.filter(({ severity }) => severity === "stop");
  const [first] = stops;
  if (first !== undefined)
    return {
      isInside: false,
      words: stops.length === 1 ? first.sentence : `${first.sentence} And ${stops.length - 1} more.`,
    };
  const isUnknown = ({ outcome }: EnvelopeVerdict) => outcome === "unknown";
  const unknown = judgeEnvelope(hand.timing, screen)
    .filter(isUnknown)
    .map(({ rule }) => unknownWords[rule]);
  const rest =
    unknown.length === 0 ? "." : `; its ${listText(unknown)} ${unknown.length === 1 ? "is" : "are"} not known.`;
  return { isInside: true, words: `inside every limit of this screen that is known${rest}` };
}

/** "the refresh and the clock" */
export function figuresInWords(figures: readonly EditFigure[]): string {
  return listText(figures.map((figure) => figureWords[figure].inSentence));
}

/** "Line rate 15.734 → 15.720 kHz" */
export function changeInWords(figure: EditFigure, from: number, to: number): string {
  return `${figureWords[figure].inSentence} ${figureText(figure, from)} → ${figureWithUnit(figure, to)}`;
}

/** "CTA-861, code 8", or the line rate of a raster that no document has. */
export function shortName(timing: RasterTiming, lineRateHz: number): string {
  const published = publishedAs(timing);
  return published === undefined ? formatLineRate(lineRateHz) : standardWords(published);
}
