import type { EnvelopeLimit } from "@/lib/timing/envelope";
import { hz, kHz, withUnit } from "@/lib/timing/figure-text";
import type { FigureChange, FitBlock, FitConstraint, FitOutcome, FitRequest } from "@/lib/timing/fit/fit-types";
import { activeFrameLines } from "@/lib/timing/rates";
import type { Finding } from "@/lib/profile/finding";
import { limitSourceText, listText } from "@/lib/profile/words";

type Where = {
  /** The rule that speaks of the same limit in a check; `wish` is the owner's own. */
  readonly rule: string;
  /** The member of the request that sets the limit. */
  readonly path: string;
  readonly from: EnvelopeLimit | "device" | "standard" | "wish";
};

const screenAt = (rule: string, limit: EnvelopeLimit): Where => ({ rule, path: `screen.${limit}`, from: limit });
const deviceAt = (rule: string, field: string): Where => ({ rule, path: `device.${field}`, from: "device" });
const wishAt = (rule: string, field: string): Where => ({ rule: `wish.${rule}`, path: field, from: "wish" });

const places: Readonly<Record<FitConstraint, Where>> = {
  "screen-line-rate": screenAt("screen.line-rate", "bands"),
  "screen-field-rate": screenAt("screen.field-rate", "bands"),
  "screen-interlace": screenAt("screen.interlace", "interlace"),
  "screen-clock": screenAt("screen.clock", "maxPixelClockHz"),
  "screen-sync": screenAt("blanking.sync", "minSyncUs"),
  "screen-back-porch": screenAt("blanking.back-porch", "minBackPorchUs"),
  "screen-field-blank": screenAt("blanking.field-blank", "minFieldBlankUs"),
  "device-clock": deviceAt("device.clock", "clockHz"),
  "device-clock-step": deviceAt("device.step", "clockHz.step"),
  "device-multiple": deviceAt("device.multiple", "horizontalMultiple"),
  "device-line-total": deviceAt("device.totals", "maxLineTotal"),
  "device-field-lines": deviceAt("device.totals", "maxFieldLines"),
  "device-interlace": deviceAt("device.interlace", "interlace"),
  "device-parts": deviceAt("device.range", "numbers"),
  "standard-line-blank": { rule: "blanking.span", path: "activePx", from: "standard" },
  "standard-field-blank": { rule: "blanking.span", path: "activeLines", from: "standard" },
  "wish-line-rate": wishAt("line-rate", "lineRateHz"),
  "wish-clock": wishAt("clock", "pixelClockHz"),
  "wish-line-total": wishAt("line-total", "lineTotal"),
  "wish-field-lines": wishAt("field-lines", "fieldLines"),
  "wish-field-rate": wishAt("field-rate", "fieldRateHz"),
};

function sourceText({ from }: Where, { screen }: FitRequest): string {
  if (from === "device") return "driver";
  if (from === "standard") return "BT.470 and CTA-861";
  if (from === "wish") return "what you keep";
  return limitSourceText(screen.sources?.[from]);
}

function changeText({ figure, to, unit }: FigureChange): string {
  if (figure === "interlaced") return to === true ? "interlaced" : "progressive";
  if (figure === "fieldRateHz") return hz(Number(to));
  if (figure === "lineRateHz") return kHz(Number(to));
  if (figure === "pixelClockHz") return withUnit(Number(to) / 1e6, "MHz");
  const of = figure === "lineTotal" ? " in a line" : figure === "fieldLines" ? " in a field" : "";
  return `${withUnit(Number(to), unit)}${of}`;
}

/**
 * The way out that asks least, in words: fewer or more lines at the rate that was wished, else the nearest raster.
 * Undefined where nothing is near.
 */
export function wayOutText({ wish }: FitRequest, { nearest }: FitOutcome): string | undefined {
  const lines = nearest.find(({ changed }) => changed.length === 1 && changed[0]?.figure === "activeLines");
  if (lines !== undefined) return `at ${hz(wish.fieldRateHz)} ${withUnit(activeFrameLines(lines.timing), "lines")} fit`;
  const [first] = nearest;
  if (first === undefined) return undefined;
  return `the nearest that fits has ${listText(first.changed.map(changeText))}`;
}

function blockFinding(block: FitBlock, way: string | undefined, request: FitRequest): Finding {
  const place = places[block.constraint];
  const fact = block.sentence.replace(/\.$/u, "");
  return {
    rule: place.rule,
    path: place.path,
    severity: "stop",
    measured: block.needed,
    limit: block.limit,
    unit: block.unit,
    sentence: way === undefined ? `${fact}.` : `${fact}; ${way}.`,
    detail: block.alone
      ? undefined
      : "Several limits are in the way together: without all of them something would fit.",
    limitSource: sourceText(place, request),
    slots: [],
    remedies: [],
  };
}

/**
 * Why nothing fits, as findings: the same rules as a check's, with what is needed, the limit and the way out. A path
 * names the member of the request that sets the limit. Empty where something fits.
 */
export function fitFindings(request: FitRequest, outcome: FitOutcome): Finding[] {
  const way = wayOutText(request, outcome);
  return outcome.blockedBy.map((block) => blockFinding(block, way, request));
}
