import { fail, ok, type Result } from "@/lib/result";
import { MAX_AXIS_COUNT, rasterProblems } from "@/lib/timing/raster-problems";
import type { AxisTiming, Polarity, RasterTiming } from "@/lib/timing/raster";

/** Longer text is no modeline: a name, nine figures and a few flags take some hundred characters. */
export const MAX_MODELINE_CHARACTERS = 2000;

/** Why a text is not read. `at` is the word that is to blame, where there is one. */
export type ModelineError = {
  readonly code:
    "too-long" | "empty" | "several" | "name" | "figures" | "number" | "order" | "flag" | "half-line" | "raster";
  readonly message: string;
  readonly at?: string | undefined;
};

/** A modeline as read. `notes` say what it left out, or what was done to it. */
export type ParsedModeline = {
  /** Empty where the line has none. */
  readonly name: string;
  readonly timing: RasterTiming;
  readonly notes: readonly string[];
};

type Read<T> = Result<T, ModelineError>;

const wrong = (code: ModelineError["code"], message: string, at?: string) =>
  fail<ModelineError>({ code, message, ...(at === undefined ? {} : { at: at.slice(0, 40) }) });

/** Text without comments and empty lines; `#` inside a quoted name is part of the name. */
function withoutComments(text: string): string[] {
  const lines = text.split(/\r\n|\r|\n/u).map((line) => /^(?:[^"#]|"[^"]*(?:"|$))*/u.exec(line)?.[0].trim() ?? "");
  return lines.filter((line) => line !== "");
}

/** Splits the name off; what follows is words between spaces. */
function nameAndWords(line: string): Read<{ name: string; words: string[] }> {
  const body = line.replace(/^modeline\b\s*/iu, "");
  if (body.startsWith('"')) {
    const end = body.indexOf('"', 1);
    if (end < 0) return wrong("name", "The name has no closing quotation mark.");
    return ok({
      name: body.slice(1, end),
      words: body
        .slice(end + 1)
        .split(/\s+/u)
        .filter((word) => word !== ""),
    });
  }
  const words = body.split(/\s+/u).filter((word) => word !== "");
  const [first = "", second] = words;
  // Nine figures and then flags: a first word that is no number, or that a tenth figure follows, is the name.
  const isFigure = (word: string | undefined) => word !== undefined && /^[+-]?[\d.]+$/u.test(word);
  const named = !isFigure(first) || (isFigure(second) && isFigure(words[9]));
  return ok(named ? { name: first, words: words.slice(1) } : { name: "", words });
}

const figureNames = [
  "pixel clock",
  "hdisp",
  "hsyncstart",
  "hsyncend",
  "htotal",
  "vdisp",
  "vsyncstart",
  "vsyncend",
  "vtotal",
];

function readFigures(words: readonly string[]): Read<number[]> {
  const figures: number[] = [];
  for (const [index, name] of figureNames.entries()) {
    const word = words[index];
    if (word === undefined) return wrong("figures", `The ${name} is missing: a modeline has a clock and eight counts.`);
    const pattern = index === 0 ? /^\d{1,6}(?:\.\d{1,9})?$/u : /^\d{1,6}$/u;
    if (!pattern.test(word))
      return wrong("number", `The ${name} is no ${index === 0 ? "number of MHz" : "whole number"}.`, word);
    figures.push(Number(word));
  }
  return ok(figures);
}

type Flags = {
  interlaced: boolean;
  doubleScan: boolean;
  horizontal?: Polarity;
  vertical?: Polarity;
  ignored: string[];
};

/** Flags that say how syncs are combined, not what the raster is. */
const ignoredFlags = new Set(["composite", "+csync", "-csync", "csync", "bcast"]);

function readFlags(words: readonly string[]): Read<Flags> {
  const flags: Flags = { interlaced: false, doubleScan: false, ignored: [] };
  for (const word of words) {
    const flag = word.toLowerCase();
    if (flag === "interlace" || flag === "interlaced") flags.interlaced = true;
    else if (flag === "doublescan") flags.doubleScan = true;
    else if (flag === "+hsync" || flag === "-hsync") flags.horizontal = flag.startsWith("+") ? "positive" : "negative";
    else if (flag === "+vsync" || flag === "-vsync") flags.vertical = flag.startsWith("+") ? "positive" : "negative";
    else if (ignoredFlags.has(flag)) flags.ignored.push(word);
    else return wrong("flag", "This flag is not known here.", word);
  }
  return ok(flags);
}

function axisOf(figures: readonly number[], polarity: Polarity): AxisTiming | undefined {
  const [active = 0, start = 0, end = 0, total = 0] = figures;
  if (!(active <= start && start <= end && end <= total)) return undefined;
  return { active, frontPorch: start - active, sync: end - start, backPorch: total - end, polarity };
}

/** Frame lines to field lines. An odd frame has its spare line in the back porch; an even one has equal fields. */
function fieldAxis(frame: AxisTiming): { axis: AxisTiming; equalFields: boolean } | undefined {
  const equalFields = (frame.active + frame.frontPorch + frame.sync + frame.backPorch) % 2 === 0;
  const backPorch = equalFields ? frame.backPorch : frame.backPorch - 1;
  const halves = [frame.active, frame.frontPorch, frame.sync, backPorch].map((lines) => lines / 2);
  const [active = 0, frontPorch = 0, sync = 0, back = 0] = halves;
  if (back < 0 || halves.some((lines) => !Number.isInteger(lines))) return undefined;
  return { axis: { active, frontPorch, sync, backPorch: back, polarity: frame.polarity }, equalFields };
}

function doubled(axis: AxisTiming): AxisTiming {
  const { active, frontPorch, sync, backPorch, polarity } = axis;
  return { active: active * 2, frontPorch: frontPorch * 2, sync: sync * 2, backPorch: backPorch * 2, polarity };
}

function rasterOf(figures: readonly number[], flags: Flags): Read<RasterTiming> {
  const horizontal = axisOf(figures.slice(1, 5), flags.horizontal ?? "negative");
  const frame = axisOf(figures.slice(5, 9), flags.vertical ?? "negative");
  if (horizontal === undefined) return wrong("order", "The four horizontal figures do not rise.");
  if (frame === undefined) return wrong("order", "The four vertical figures do not rise.");
  const scanned = flags.doubleScan ? doubled(frame) : frame;
  const field = flags.interlaced ? fieldAxis(scanned) : { axis: scanned, equalFields: false };
  if (field === undefined) {
    return wrong("half-line", "The lines of this interlaced frame do not divide into two fields of whole lines.");
  }
  return ok({
    pixelClockHz: Math.round((figures[0] ?? 0) * 1e6),
    interlaced: flags.interlaced,
    ...(field.equalFields ? { equalFields: true } : {}),
    horizontal,
    vertical: field.axis,
  });
}

function notesOn(flags: Flags): string[] {
  const unsaid = [flags.horizontal === undefined ? "horizontal" : "", flags.vertical === undefined ? "vertical" : ""];
  const missing = unsaid.filter((axis) => axis !== "");
  return [
    ...(missing.length > 0 ? [`No ${missing.join(" or ")} polarity is given: negative is assumed.`] : []),
    ...(flags.doubleScan ? ["Doublescan: each line is sent twice, so all vertical figures are doubled."] : []),
    ...(flags.ignored.length > 0 ? [`Not part of the raster: ${flags.ignored.join(", ")}.`] : []),
  ];
}

/**
 * Reads one X.Org modeline: `Modeline "name" clock hdisp hsyncstart hsyncend htotal vdisp vsyncstart vsyncend vtotal flags`.
 *
 * The keyword, the name and the polarities may be missing; comments (`#`) and any spaces are taken. The clock is in MHz.
 * An interlaced modeline counts frame lines: what does not divide into whole field lines is refused, never rounded.
 * Errors: a `ModelineError`; nothing is half read.
 */
export function parseModeline(text: string): Read<ParsedModeline> {
  if (text.length > MAX_MODELINE_CHARACTERS)
    return wrong("too-long", `Longer than ${MAX_MODELINE_CHARACTERS} characters.`);
  const [line, ...others] = withoutComments(text);
  if (line === undefined) return wrong("empty", "There is no modeline in it.");
  if (others.length > 0) return wrong("several", "More than one line: paste one modeline at a time.");
  const head = nameAndWords(line);
  if (!head.ok) return head;
  const figures = readFigures(head.value.words);
  if (!figures.ok) return figures;
  const flags = readFlags(head.value.words.slice(figureNames.length));
  if (!flags.ok) return flags;
  const timing = rasterOf(figures.value, flags.value);
  if (!timing.ok) return timing;
  const [problem] = rasterProblems(timing.value);
  if (problem !== undefined) return wrong("raster", `${problem.path}: ${problem.message} (${MAX_AXIS_COUNT} at most)`);
  return ok({ name: head.value.name, timing: timing.value, notes: notesOn(flags.value) });
}
