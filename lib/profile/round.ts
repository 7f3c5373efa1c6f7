import type { RasterTiming } from "@/lib/timing/raster";
import { cleanFigure } from "./clean-figure";
import type { ProfileDocument } from "./document";
import type { DeviceLimits, NumberLimit } from "./limits";
import { neutralSetting, type NeutralSetting } from "./neutral-settings";
import { modePath, slotPath } from "./paths";

/** A number that the device holds differently. */
export type RoundedValue = {
  readonly path: string;
  readonly setting: NeutralSetting;
  readonly asked: number;
  readonly held: number;
  readonly limit: NumberLimit;
};

/** A value that the device has no word for: taken out of the rounded document, so that no rule judges it. */
export type LackedValue = { readonly path: string; readonly setting: NeutralSetting; readonly value: unknown };

/** A number beyond what the device holds, on its steps all the same. */
export type OutOfRangeValue = {
  readonly path: string;
  readonly setting: NeutralSetting;
  readonly value: number;
  readonly limit: NumberLimit;
};

export type RoundedDocument = {
  readonly document: ProfileDocument;
  readonly rounded: readonly RoundedValue[];
  readonly lacks: readonly LackedValue[];
  readonly outOfRange: readonly OutOfRangeValue[];
};

/** Keeps a tie a tie although binary fractions fall short of it; far below a step. */
const BINARY_NOISE = 1e-9;

/** The value of step `n` of a limit. */
export function valueOfStep(limit: NumberLimit, n: number): number {
  return cleanFigure(limit.min + n * limit.step);
}

/** How many steps lie between `min` and `max`. */
export function stepCount(limit: NumberLimit): number {
  return Math.floor((limit.max - limit.min) / limit.step + BINARY_NOISE);
}

/** The step nearest to a value, ties up; below 0 or above `stepCount` where the value is out of range. */
export function nearestStep(value: number, limit: NumberLimit): number {
  return Math.floor((value - limit.min) / limit.step + 0.5 + BINARY_NOISE);
}

/** A value on the steps of a limit (anchored at `min`, ties up). Out of range stays out of range. */
export function roundToStep(value: number, limit: NumberLimit): number {
  const last = stepCount(limit);
  const step = nearestStep(value, limit);
  // A range need not end on a step: what lies past the last one but within the range is held as the last one.
  const held = valueOfStep(limit, step > last && value <= limit.max + BINARY_NOISE ? last : step);
  // So far out of range that its steps cannot be counted.
  return Number.isFinite(held) ? held : value;
}

/** Whether a value that stands on the steps lies within them. */
export function isInRange(value: number, limit: NumberLimit): boolean {
  const step = nearestStep(value, limit);
  return step >= 0 && step <= stepCount(limit);
}

/** The limit of a number by its pattern. A pixel clock without one of its own has the device's clock range. */
export function numberLimit(device: DeviceLimits, pattern: string): NumberLimit | undefined {
  return device.numbers[pattern] ?? (pattern === "modes[*].timing.pixelClockHz" ? device.clockHz : undefined);
}

/** Whether the device has a word for a setting at all. */
export function hasSetting(device: DeviceLimits, pattern: string): boolean {
  if (pattern === "slots[*].input") return device.inputs.length > 0;
  return numberLimit(device, pattern) !== undefined || pattern in device.choices || pattern in device.texts;
}

/** The words that a device has for a choice, or undefined where it is no choice of this device. */
export function choicesOf(device: DeviceLimits, pattern: string): readonly string[] | undefined {
  if (pattern === "slots[*].input") return device.inputs.map((input) => input.name);
  return device.choices[pattern];
}

/** A timing on the device's steps. A part that the device has no limit for stays as it is. */
export function roundTiming(timing: RasterTiming, device: DeviceLimits): RasterTiming {
  const held = (value: number, field: string) => {
    const limit = numberLimit(device, `modes[*].timing.${field}`);
    return limit ? roundToStep(value, limit) : value;
  };
  const axis = (name: "horizontal" | "vertical") => ({
    ...timing[name],
    active: held(timing[name].active, `${name}.active`),
    frontPorch: held(timing[name].frontPorch, `${name}.frontPorch`),
    sync: held(timing[name].sync, `${name}.sync`),
    backPorch: held(timing[name].backPorch, `${name}.backPorch`),
  });
  return {
    ...timing,
    pixelClockHz: held(timing.pixelClockHz, "pixelClockHz"),
    horizontal: axis("horizontal"),
    vertical: axis("vertical"),
  };
}

type Notes = { rounded: RoundedValue[]; lacks: LackedValue[]; outOfRange: OutOfRangeValue[] };
type At = { readonly path: string; readonly pattern: string };

/** Parts of a timing stay even where the device has no word for them: a timing is whole or absent. */
function isTaken(setting: NeutralSetting, value: unknown, device: DeviceLimits): boolean {
  if (setting.pattern.startsWith("modes[*].timing.")) return true;
  if (setting.kind === "key") return true;
  if (!hasSetting(device, setting.pattern)) return false;
  // Inputs are named by their device: a name from another one is no word of this one.
  return setting.pattern !== "slots[*].input" || device.inputs.some((input) => input.name === value);
}

function roundLeaf(value: unknown, { path, pattern }: At, device: DeviceLimits, notes: Notes): unknown {
  const setting = neutralSetting(pattern);
  if (!setting) return value;
  if (!isTaken(setting, value, device)) {
    notes.lacks.push({ path, setting, value });
    return undefined;
  }
  const limit = numberLimit(device, pattern);
  if (typeof value !== "number" || !limit) return value;
  const held = roundToStep(value, limit);
  if (!isInRange(held, limit)) notes.outOfRange.push({ path, setting, value: held, limit });
  else if (held !== value) notes.rounded.push({ path, setting, asked: value, held, limit });
  return held;
}

function roundGroup<T extends object>(group: T, at: At, device: DeviceLimits, notes: Notes): T {
  const entries: [string, unknown][] = [];
  for (const [name, value] of Object.entries(group) as [string, unknown][]) {
    if (value === undefined) continue;
    const inner = { path: `${at.path}.${name}`, pattern: `${at.pattern}.${name}` };
    const isGroup = typeof value === "object" && value !== null && !Array.isArray(value);
    const held = isGroup ? roundGroup(value, inner, device, notes) : roundLeaf(value, inner, device, notes);
    if (held !== undefined) entries.push([name, held]);
  }
  // The same fields with numbers for numbers; only optional ones are taken out (`isTaken`).
  return Object.fromEntries(entries) as T;
}

/**
 * A document as the device would hold it: every number on the device's steps, what it has no word for taken out.
 *
 * This is where rounding happens, once; rounding again changes nothing. Every other rule, the plan and comparisons
 * judge the rounded document.
 */
export function roundDocument(document: ProfileDocument, device: DeviceLimits): RoundedDocument {
  const notes: Notes = { rounded: [], lacks: [], outOfRange: [] };
  const everywhere =
    document.everywhere &&
    roundGroup(document.everywhere, { path: "everywhere", pattern: "everywhere" }, device, notes);
  const modes = document.modes?.map((mode) =>
    roundGroup(mode, { path: modePath(mode.key), pattern: "modes[*]" }, device, notes),
  );
  const slots = document.slots?.map((slot) =>
    roundGroup(slot, { path: slotPath(slot.number), pattern: "slots[*]" }, device, notes),
  );
  const held = { ...document, ...(everywhere && { everywhere }), ...(modes && { modes }), ...(slots && { slots }) };
  return { document: held, ...notes };
}
