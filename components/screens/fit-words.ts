import { formatClock, formatFieldRate, formatFigure, formatLineRate, formatUs } from "@/components/ui/figures";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { judgeEnvelope } from "@/lib/timing/judge-envelope";
import type { EnvelopeVerdict, RasterRule } from "@/lib/timing/judge-envelope";
import type { RasterTiming } from "@/lib/timing/raster";

export type Fit = {
  readonly fits: boolean;
  /** Why not, in words, or nothing. */
  readonly words: string;
};

const ruleWords: Readonly<Record<RasterRule, string>> = {
  "line-rate": "line rate",
  "field-rate": "field rate",
  interlace: "interlace",
  clock: "pixel clock",
  sync: "line sync",
  "back-porch": "back porch",
  "field-blank": "field blanking",
};

const rateText: Readonly<Partial<Record<RasterRule, (value: number) => string>>> = {
  "line-rate": formatLineRate,
  "field-rate": formatFieldRate,
  clock: formatClock,
};

function verdictWords(verdict: EnvelopeVerdict): string {
  if (verdict.rule === "interlace") return "this screen takes no interlace";
  const text = rateText[verdict.rule] ?? formatUs;
  const side =
    verdict.max !== undefined && verdict.measured > verdict.max ? ["ends", verdict.max] : ["begins", verdict.min];
  const [verb, limit] = side;
  if (typeof limit !== "number") return `${ruleWords[verdict.rule]} ${text(verdict.measured)}`;
  const least =
    verdict.unit === "µs" ? `needs ${formatFigure(limit, "µs", { decimalsAtMost: 2 })}` : `${verb} at ${text(limit)}`;
  return `${ruleWords[verdict.rule]} ${text(verdict.measured)}, this screen ${least}`;
}

/** Whether a screen takes a raster, and what keeps it from it. Bands that are not known are no fit. */
export function fitOf(timing: RasterTiming, envelope: ScreenEnvelope): Fit {
  if (envelope.bands.length === 0) return { fits: false, words: "this screen’s bands are not known" };
  const outside = judgeEnvelope(timing, envelope).filter((verdict) => verdict.outcome === "outside");
  return { fits: outside.length === 0, words: outside.map(verdictWords).join("; ") };
}

/** What keeps a screen from taking a raster, in a word or two: "line rate above". Empty where it fits. */
export function misfitInShort(timing: RasterTiming, envelope: ScreenEnvelope): string {
  const outside = judgeEnvelope(timing, envelope).find((verdict) => verdict.outcome === "outside");
  if (outside === undefined) return envelope.bands.length === 0 ? "bands not known" : "";
  if (outside.rule === "interlace") return "interlaced";
  const isAbove = outside.max !== undefined && outside.measured > outside.max;
  const side = outside.unit === "µs" ? "too short" : isAbove ? "above" : "below";
  return `${ruleWords[outside.rule]} ${side}`;
}
