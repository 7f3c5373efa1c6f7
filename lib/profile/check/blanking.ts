import { judgeBlanking, type BlankingVerdict } from "@/lib/timing/judge-blanking";
import { judgeEnvelope, type EnvelopeVerdict } from "@/lib/timing/judge-envelope";
import { axisBlank, horizontalUs, lineRateHz } from "@/lib/timing/rates";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { RasterTiming } from "@/lib/timing/raster";
import type { Finding, Remedy } from "@/lib/profile/finding";
import { modePath } from "@/lib/profile/paths";
import { limitSourceText, listText, microsecondText, spanText, withUnit } from "@/lib/profile/words";
import type { CheckContext, JudgedMode } from "./context";
import { nearestWay } from "./nearest-raster";
import { leaveOutAll, otherModeRemedies } from "./remedies";
import { shiftRemedy, type BlankingShift } from "./shift-blanking";

/** A set clamps black on the back porch. Common practice, no source; BT.470's burst ends 3.1 µs after sync. */
const CLAMP_MIN_US = 3.2;
/** Line rates that count as "15 kHz". Ours, no source. */
const CLAMP_RATES_HZ: readonly [number, number] = [14_000, 17_000];

type TimedMode = JudgedMode & { readonly timing: RasterTiming };

type MinimumRule = Extract<EnvelopeVerdict["rule"], "sync" | "back-porch" | "field-blank">;

const minimumNames: Readonly<
  Record<MinimumRule, { name: string; field: string; axis: "horizontal" | "vertical"; part: "sync" | "backPorch" }>
> = {
  sync: { name: "sync", field: "horizontal.sync", axis: "horizontal", part: "sync" },
  "back-porch": { name: "back porch", field: "horizontal.backPorch", axis: "horizontal", part: "backPorch" },
  "field-blank": { name: "field blanking", field: "vertical", axis: "vertical", part: "backPorch" },
};

function isMinimum(rule: EnvelopeVerdict["rule"]): rule is MinimumRule {
  return rule in minimumNames;
}

/** The shift that brings a minimum's part to its least count; field blanking grows at its back porch. */
function shiftToMinimum(timing: RasterTiming, rule: MinimumRule, count: number): BlankingShift {
  const { axis, part } = minimumNames[rule];
  if (rule !== "field-blank") return { axis, part, count };
  return { axis, part, count: timing.vertical.backPorch + count - axisBlank(timing.vertical) };
}

function otherWays(context: CheckContext, mode: JudgedMode): Remedy[] {
  return [
    ...otherModeRemedies(context, mode.changedUsers, mode),
    ...nearestWay(context, mode).remedies,
    ...leaveOutAll(mode.changedUsers),
  ];
}

function minimumFindings(context: CheckContext, mode: TimedMode, screen: ScreenEnvelope): Finding[] {
  return judgeEnvelope(mode.timing, screen).flatMap((verdict) => {
    const { rule, outcome, min, nearestCount } = verdict;
    if (outcome !== "outside" || !isMinimum(rule) || min === undefined) return [];
    const { name, field } = minimumNames[rule];
    const passes = (timing: RasterTiming) =>
      judgeEnvelope(timing, screen).every((other) => other.rule !== rule || other.outcome === "inside");
    const shift = nearestCount && shiftToMinimum(mode.timing, rule, nearestCount.count);
    const remedies = shift
      ? shiftRemedy({ key: mode.key, timing: mode.timing, device: context.device }, shift, passes)
      : [];
    return [
      {
        rule: `blanking.${rule}`,
        path: modePath(mode.key, `timing.${field}`),
        severity: "stop",
        measured: verdict.measured,
        limit: min,
        unit: "µs",
        sentence: `Mode ${mode.key}'s ${name} is ${microsecondText(verdict.measured)}, too short for this screen.`,
        detail: `${screen.name} needs ${microsecondText(min)} at least${nearestCount ? `, which is ${withUnit(nearestCount.count, nearestCount.unit)} here` : ""}.${nearestWay(context, mode).words}`,
        limitSource: limitSourceText(verdict.source),
        slots: mode.users,
        remedies: [...remedies, ...otherWays(context, mode)],
      },
    ];
  });
}

const partNames: Readonly<Record<BlankingVerdict["part"], string>> = {
  frontPorch: "front porch",
  sync: "sync",
  backPorch: "back porch",
  blank: "blanking",
};

function partName({ axis, part }: BlankingVerdict): string {
  const which = axis === "horizontal" ? "line" : "field";
  return part === "blank" ? `${which} blanking` : `${axis} ${partNames[part]}`;
}

/** "BT.470 525/60", "CTA-861 codes": the documents, each once. */
function documents(from: readonly string[]): string {
  return listText([...new Set(from.map((name) => name.split(" ")[0] ?? name))]);
}

/** The shift that brings a part to the nearest end of its span, in whole clocks or lines. */
function shiftToSpan(timing: RasterTiming, verdict: BlankingVerdict): BlankingShift | null {
  const { axis, part, nearest, measured, count } = verdict;
  if (nearest === undefined) return null;
  const unitPerCount = axis === "horizontal" ? 1e6 / timing.pixelClockHz : 1;
  const wanted =
    nearest > measured ? Math.ceil(nearest / unitPerCount - 1e-6) : Math.floor(nearest / unitPerCount + 1e-6);
  if (part !== "blank") return { axis, part, count: wanted };
  return { axis, part: "backPorch", count: timing[axis].backPorch + wanted - count };
}

function spanFindings(context: CheckContext, mode: TimedMode): Finding[] {
  return judgeBlanking(mode.timing).flatMap((verdict): Finding[] => {
    if (verdict.outcome === "inside") return [];
    const text = (value: number) => (verdict.unit === "µs" ? microsecondText(value) : withUnit(value, "lines", 1));
    const passes = (timing: RasterTiming) =>
      judgeBlanking(timing).every(
        (other) => other.axis !== verdict.axis || other.part !== verdict.part || other.outcome === "inside",
      );
    const shift = shiftToSpan(mode.timing, verdict);
    const remedies = shift
      ? shiftRemedy({ key: mode.key, timing: mode.timing, device: context.device }, shift, passes)
      : [];
    const absent = verdict.outcome === "absent";
    const field = verdict.part === "blank" ? verdict.axis : `${verdict.axis}.${verdict.part}`;
    const side = verdict.nearest !== undefined && verdict.nearest > verdict.measured ? "shorter" : "longer";
    return [
      {
        rule: absent ? "blanking.absent" : "blanking.span",
        path: modePath(mode.key, `timing.${field}`),
        severity: absent ? "stop" : "caution",
        measured: verdict.measured,
        limit: verdict.span,
        unit: verdict.unit,
        sentence: absent
          ? `Mode ${mode.key} has no ${partName(verdict)}: nothing can lock to it.`
          : `Mode ${mode.key}'s ${partName(verdict)} is ${text(verdict.measured)}, ${side} than published rasters of this line rate.`,
        detail: absent
          ? nearestWay(context, mode).words.trim() || undefined
          : verdict.span && `They span ${spanText(verdict.span, text)}.`,
        limitSource: absent ? "common practice, no source" : documents(verdict.from),
        slots: mode.users,
        remedies: [...remedies, ...(absent ? otherWays(context, mode) : [])],
      },
    ];
  });
}

function isClampShort(timing: RasterTiming): boolean {
  const rate = lineRateHz(timing);
  return rate >= CLAMP_RATES_HZ[0] && rate <= CLAMP_RATES_HZ[1] && horizontalUs(timing).backPorch < CLAMP_MIN_US;
}

function clampFindings(context: CheckContext, mode: TimedMode): Finding[] {
  if (!isClampShort(mode.timing)) return [];
  const measured = horizontalUs(mode.timing).backPorch;
  const count = Math.ceil((CLAMP_MIN_US * mode.timing.pixelClockHz) / 1e6);
  const shift = { axis: "horizontal", part: "backPorch", count } as const;
  return [
    {
      rule: "blanking.clamp",
      path: modePath(mode.key, "timing.horizontal.backPorch"),
      severity: "caution",
      measured,
      limit: CLAMP_MIN_US,
      unit: "µs",
      sentence: `Mode ${mode.key}'s back porch is ${microsecondText(measured)}: the picture may darken.`,
      detail: `A 15 kHz set takes black from the back porch; under ${microsecondText(CLAMP_MIN_US)} it may take it from the picture.`,
      limitSource: "common practice, no source",
      slots: mode.users,
      remedies: shiftRemedy(
        { key: mode.key, timing: mode.timing, device: context.device },
        shift,
        (timing) => !isClampShort(timing),
      ),
    },
  ];
}

/** `blanking`: syncs and porches, in µs and lines, against the screen's minimums and what published rasters span. */
export function blankingFindings(context: CheckContext): Finding[] {
  const { screen } = context;
  return context.modes.flatMap((mode) => {
    if (!mode.timing) return [];
    const timed: TimedMode = { ...mode, timing: mode.timing };
    return [
      ...(screen ? minimumFindings(context, timed, screen) : []),
      ...spanFindings(context, timed),
      ...clampFindings(context, timed),
    ];
  });
}
