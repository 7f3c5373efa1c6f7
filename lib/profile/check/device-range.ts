import type { Finding, Remedy } from "@/lib/profile/finding";
import type { NumberLimit } from "@/lib/profile/limits";
import { neutralSettings, type NeutralSetting } from "@/lib/profile/neutral-settings";
import { getValue, modePath, parsePath, slotPath } from "@/lib/profile/paths";
import { choicesOf, stepCount, valueOfStep, type OutOfRangeValue, type RoundedValue } from "@/lib/profile/round";
import { clockText, listText, percent, spanText, withUnit } from "@/lib/profile/words";
import type { CheckContext } from "./context";
import { leaveOut, leaveOutAll, setValue } from "./remedies";

/** Words of a choice that are offered to be set by one click. */
const MAX_CHOICES = 4;

/** "Slot 1's width", "Mode 3's pixel clock", "Trim left" */
function subject(path: string, setting: NeutralSetting): string {
  const parsed = parsePath(path);
  const label = setting.label.charAt(0).toLowerCase() + setting.label.slice(1);
  if (parsed?.scope === "slot") return `Slot ${parsed.number}'s ${label}`;
  if (parsed?.scope === "mode") return `Mode ${parsed.key}'s ${label}`;
  return setting.label;
}

/** A value of a setting with its unit, as this product writes it. */
export function settingText(value: number, setting: NeutralSetting): string {
  if (setting.unit === "Hz") return clockText(value);
  if (setting.unit === "%") return percent(value);
  return withUnit(value, setting.unit);
}

/** Slots that a path is about: its own, or those that use its mode. */
export function slotsOf(path: string, context: CheckContext): readonly number[] {
  const parsed = parsePath(path);
  if (parsed?.scope === "slot") return [parsed.number];
  if (parsed?.scope === "mode") return context.modes.find(({ key }) => key === parsed.key)?.users ?? [];
  return [];
}

function leaveOutOf(path: string, context: CheckContext): Remedy[] {
  return leaveOutAll(slotsOf(path, context).filter((slot) => !context.unchangedSlots.has(slot)));
}

function highest(limit: NumberLimit): number {
  return valueOfStep(limit, stepCount(limit));
}

function rangeFinding({ path, setting, value, limit }: OutOfRangeValue, context: CheckContext): Finding {
  const nearest = value < limit.min ? limit.min : highest(limit);
  const text = (one: number) => settingText(one, setting);
  return {
    rule: setting.unit === "Hz" ? "device.clock" : "device.range",
    path,
    severity: "stop",
    measured: value,
    limit: [limit.min, limit.max],
    unit: setting.unit,
    sentence: `${subject(path, setting)} of ${text(value)} is beyond this device's range.`,
    detail: `${context.device?.name ?? "The device"} takes ${spanText([limit.min, limit.max], text)}.`,
    limitSource: "driver",
    slots: slotsOf(path, context),
    remedies: [setValue(`Use ${text(nearest)}`, path, nearest), ...leaveOutOf(path, context)],
  };
}

function stepFinding({ path, setting, asked, held, limit }: RoundedValue, context: CheckContext): Finding {
  const step = setting.unit === "Hz" ? withUnit(limit.step, "Hz") : withUnit(limit.step, setting.unit);
  return {
    rule: "device.step",
    path,
    severity: "note",
    measured: asked,
    limit: held,
    unit: setting.unit,
    sentence: `${subject(path, setting)} is rounded on this device.`,
    detail: `${setting.label} moves in steps of ${step}: ${withUnit(asked, setting.unit, 6)} becomes ${withUnit(held, setting.unit, 6)}.`,
    limitSource: "driver",
    slots: slotsOf(path, context),
    remedies: [],
  };
}

function choiceFinding(
  path: string,
  setting: NeutralSetting,
  value: string,
  words: readonly string[],
  context: CheckContext,
): Finding {
  return {
    rule: "device.choice",
    path,
    severity: "stop",
    measured: value,
    limit: words.join(", "),
    sentence: `${subject(path, setting)} cannot be ${value} on this device.`,
    detail: words.length === 0 ? undefined : `It offers ${listText(words)}.`,
    limitSource: "driver",
    slots: slotsOf(path, context),
    remedies: [
      ...words.slice(0, MAX_CHOICES).map((word) => setValue(`Use ${word}`, path, word)),
      ...leaveOutOf(path, context),
    ],
  };
}

/** Words that the device does not have. An input's name from another device is lacked instead (`device.lacks`). */
function choiceFindings(context: CheckContext): Finding[] {
  const { device, document } = context;
  if (!device) return [];
  const settings = neutralSettings.filter(
    (setting) => setting.kind === "choice" && setting.pattern !== "slots[*].input",
  );
  const paths = (pattern: string) => {
    const field = pattern.slice(pattern.indexOf("].") + 2);
    if (pattern.startsWith("slots")) return (document.slots ?? []).map((slot) => slotPath(slot.number, field));
    return (document.modes ?? []).map((mode) => modePath(mode.key, field));
  };
  return settings.flatMap((setting) => {
    const words = choicesOf(device, setting.pattern);
    if (!words) return [];
    return paths(setting.pattern).flatMap((path) => {
      const value = getValue(document, path);
      return typeof value === "string" && !words.includes(value)
        ? [choiceFinding(path, setting, value, words, context)]
        : [];
    });
  });
}

function capacityFindings(context: CheckContext): Finding[] {
  const { device, slots, modes } = context;
  if (!device) return [];
  const last = device.firstSlot + device.slotCapacity - 1;
  const beyond = slots
    .filter(({ number }) => number < device.firstSlot || number > last)
    .map(({ number }): Finding => ({
      rule: "device.slots",
      path: slotPath(number),
      severity: "stop",
      measured: number,
      limit: [device.firstSlot, last],
      sentence: `This device has no slot ${number}.`,
      detail: `${device.name} has slots ${device.firstSlot} to ${last}.`,
      limitSource: "driver",
      slots: [number],
      remedies: [leaveOut(number)],
    }));
  if (modes.length <= device.modeCapacity) return beyond;
  return [
    ...beyond,
    {
      rule: "device.modes",
      path: "modes",
      severity: "stop",
      measured: modes.length,
      limit: device.modeCapacity,
      unit: "modes",
      sentence: `${modes.length} modes are more than this device holds.`,
      detail: `${device.name} holds ${device.modeCapacity}.`,
      limitSource: "driver",
      slots: [],
      remedies: [],
    },
  ];
}

/** `device` range, step, choice, capacity: what it cannot hold, and what it holds differently. */
export function deviceRangeFindings(context: CheckContext): Finding[] {
  const { rounding } = context;
  if (!rounding) return [];
  return [
    ...capacityFindings(context),
    ...rounding.outOfRange.map((value) => rangeFinding(value, context)),
    ...choiceFindings(context),
    ...rounding.rounded.map((value) => stepFinding(value, context)),
  ];
}
