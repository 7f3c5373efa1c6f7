import { judgeEnvelope, type EnvelopeVerdict } from "@/lib/timing/judge-envelope";
import { followInput } from "@/lib/timing/slip/rate-slip";
import type { RasterTiming } from "@/lib/timing/raster";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { Finding } from "@/lib/profile/finding";
import { modePath, slotPath } from "@/lib/profile/paths";
import { clockText, fieldRateText, limitSourceText, lineRateText, spanText } from "@/lib/profile/words";
import type { CheckContext, JudgedMode } from "./context";
import { nearestWay } from "./nearest-raster";
import { leaveOutAll, modeText, otherModeRemedies } from "./remedies";

export type ScreenRule = "line-rate" | "field-rate" | "interlace" | "clock";

const texts: Readonly<Record<ScreenRule, (value: number) => string>> = {
  "line-rate": lineRateText,
  "field-rate": fieldRateText,
  interlace: (fields) => (fields === 2 ? "interlaced" : "progressive"),
  clock: clockText,
};

function isScreenRule(rule: EnvelopeVerdict["rule"]): rule is ScreenRule {
  return rule in texts;
}

/** A raster's figure and the screen's limit, as sentence and detail. `what` is the subject: "Mode 3". */
export function screenWords(
  verdict: EnvelopeVerdict,
  rule: ScreenRule,
  what: string,
  screen: ScreenEnvelope,
): { sentence: string; detail: string } {
  const text = texts[rule];
  if (rule === "interlace") {
    return {
      sentence: `${what} is interlaced, and this screen takes progressive rasters alone.`,
      detail: `Limit of ${screen.name}.`,
    };
  }
  const names = { "line-rate": "runs at", "field-rate": "has a field rate of", clock: "has a pixel clock of" };
  const { min, max, nearest } = verdict;
  const range =
    min !== undefined && max !== undefined
      ? spanText([min, max], text)
      : max !== undefined
        ? `${text(max)} at most`
        : "nothing that could be used";
  const way = nearest === undefined ? "" : ` Nearest that fits: ${text(nearest)}.`;
  const side = nearest !== undefined && nearest > verdict.measured ? "too slow" : "too fast";
  return {
    sentence: `${what} ${names[rule]} ${text(verdict.measured)}, ${side} for this screen.`,
    detail: `${screen.name} takes ${range}.${way}`,
  };
}

/** The limits of `screen` that a raster breaks, blanking aside. */
export function brokenScreenLimits(
  timing: RasterTiming,
  screen: ScreenEnvelope,
): { verdict: EnvelopeVerdict; rule: ScreenRule }[] {
  return judgeEnvelope(timing, screen).flatMap((verdict) =>
    verdict.outcome === "outside" && isScreenRule(verdict.rule) ? [{ verdict, rule: verdict.rule }] : [],
  );
}

/** The part of a finding that the verdict alone gives. */
export function screenFinding(
  found: { verdict: EnvelopeVerdict; rule: ScreenRule },
  what: string,
  screen: ScreenEnvelope,
) {
  const { verdict, rule } = found;
  const { min, max } = verdict;
  const limit = min !== undefined && max !== undefined ? ([min, max] as const) : max;
  return {
    rule: `screen.${rule}`,
    severity: "stop" as const,
    measured: verdict.measured,
    limit,
    unit: verdict.unit,
    ...screenWords(verdict, rule, what, screen),
    limitSource: limitSourceText(verdict.source),
  };
}

function ofMode(context: CheckContext, mode: JudgedMode, screen: ScreenEnvelope): Finding[] {
  const { timing } = mode;
  if (!timing) return [];
  const broken = brokenScreenLimits(timing, screen);
  if (broken.length === 0) return [];
  const nearest = nearestWay(context, mode);
  return broken.map((found) => {
    const finding = screenFinding(found, `Mode ${mode.key}`, screen);
    return {
      ...finding,
      detail: `${finding.detail}${nearest.words}`,
      path: modePath(mode.key, "timing"),
      slots: mode.users,
      remedies: [
        ...otherModeRemedies(context, mode.changedUsers, mode),
        ...nearest.remedies,
        ...leaveOutAll(mode.changedUsers),
      ],
    };
  });
}

function followed(context: CheckContext, screen: ScreenEnvelope): Finding[] {
  if (context.device?.outputClock !== "input") return [];
  return context.slots.flatMap(({ number, slot, timing, source }) => {
    if (!timing || !source) return [];
    const nominal = new Set(brokenScreenLimits(timing, screen).map(({ rule }) => rule));
    const what = `Slot ${number} follows its source: ${modeText(slot.mode ?? "", timing)}`;
    return brokenScreenLimits(followInput(timing, source.fieldRateHz), screen)
      .filter(({ rule }) => !nominal.has(rule))
      .map((found) => ({
        ...screenFinding(found, what, screen),
        path: slotPath(number, "mode"),
        slots: [number],
        remedies: leaveOutAll([number]),
      }));
  });
}

/** `screen`: line rate, field rate, interlace and pixel clock against the envelope. */
export function screenFindings(context: CheckContext): Finding[] {
  const { screen } = context;
  if (!screen) return [];
  return [...context.modes.flatMap((mode) => ofMode(context, mode, screen)), ...followed(context, screen)];
}
