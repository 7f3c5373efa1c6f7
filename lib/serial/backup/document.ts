import { PROFILE_FORMAT, PROFILE_VERSION, type ProfileDocument, type ProfileMode, type ProfileSlot } from "@/lib/profile/document";
import type { RasterTiming } from "@/lib/timing/raster";
import type { CompiledDriver, CompiledSetting } from "@/lib/serial/driver/compiled";
import { toNative, toNeutral, type NeutralValue } from "@/lib/serial/driver/neutral";
import type { NativeValue, NativeValues } from "@/lib/serial/native";

/** A part of a document while it is put together: words to values, or to more parts. */
type Part = { [name: string]: Part | NeutralValue };

/** The path inside its slot, mode or document: `placement.offsetPx`, `timing.horizontal.sync`, `everywhere.trim.leftPx`. */
function innerPath(setting: CompiledSetting): readonly string[] {
  return (setting.number === undefined ? setting.pattern : setting.pattern.slice(setting.pattern.indexOf("].") + 2)).split(".");
}

function put(part: Part, path: readonly string[], value: NeutralValue): void {
  const [name, ...rest] = path;
  if (name === undefined) return;
  if (rest.length === 0) part[name] = value;
  else {
    const inner = part[name];
    const next: Part = typeof inner === "object" ? inner : {};
    part[name] = next;
    put(next, rest, value);
  }
}

function look(part: unknown, path: readonly string[]): unknown {
  return path.reduce<unknown>((inner, name) => (typeof inner === "object" && inner !== null ? (inner as Record<string, unknown>)[name] : undefined), part);
}

/** The document's word for a native value; undefined where it says nothing (an empty slot, a blank name, a word unknown to the driver). */
function documentValue(driver: CompiledDriver, setting: CompiledSetting, native: NativeValue): NeutralValue | undefined {
  if (setting.pattern === "slots[*].mode") return native === driver.definition.slots.emptyMode ? undefined : String(native);
  if (setting.value.type === "text" && native === "") return undefined;
  return toNeutral(setting.value, native);
}

const AXIS_PARTS = ["active", "frontPorch", "sync", "backPorch", "polarity"];

function isWholeTiming(timing: unknown): timing is RasterTiming {
  const whole = ["horizontal", "vertical"].every((axis) => AXIS_PARTS.every((part) => look(timing, [axis, part]) !== undefined));
  return whole && look(timing, ["pixelClockHz"]) !== undefined;
}

/** A mode's timing is whole or absent. A device without a word for scan or polarity has progressive modes with negative sync. */
function finishMode(mode: Part): Part {
  const timing = mode["timing"];
  if (typeof timing !== "object") return mode;
  timing["interlaced"] ??= false;
  for (const axis of [timing["horizontal"], timing["vertical"]]) if (typeof axis === "object") axis["polarity"] ??= "negative";
  if (!isWholeTiming(timing)) delete mode["timing"];
  return mode;
}

/**
 * The neutral document of what a device holds. Mode keys are the device's own numbers; an empty slot stands there without a mode.
 * @param values native values; those that are missing are left out
 */
export function documentFromNative(driver: CompiledDriver, values: NativeValues): ProfileDocument {
  const document: Part = {};
  const modes = new Map<number, Part>();
  const slots = new Map<number, Part>();
  for (const setting of driver.settings) {
    const native = values[setting.key];
    if (!setting.neutral || native === undefined) continue;
    const { scope, number } = setting;
    let target = document;
    if (number !== undefined) {
      const group = scope === "mode" ? modes : slots;
      target = group.get(number) ?? (scope === "mode" ? { key: String(number) } : { number });
      group.set(number, target);
    }
    const value = documentValue(driver, setting, native);
    if (value !== undefined) put(target, innerPath(setting), value);
  }
  const byNumber = (group: Map<number, Part>) => [...group].sort(([a], [b]) => a - b).map(([, part]) => part);
  return {
    format: PROFILE_FORMAT, version: PROFILE_VERSION,
    madeFor: { driver: { slug: driver.definition.slug } },
    ...document,
    // The parts were put together from the driver's neutral paths, whose kinds compileDriver has checked.
    modes: byNumber(modes).map(finishMode) as unknown as ProfileMode[],
    slots: byNumber(slots) as unknown as ProfileSlot[],
  };
}

/**
 * The native values of a merged document: what it names, over `base`. The exact inverse of `documentFromNative` on a device's own values.
 *
 * What the document does not name, or names in a word that the driver does not have, stays as `base` has it. Numbers go to the
 * device's nearest step (ties up) and are not clamped: ranges are judged by the check, before.
 * @param document mode keys are the device's own numbers
 */
export function nativeFromDocument(driver: CompiledDriver, document: ProfileDocument, base: NativeValues): NativeValues {
  const modes = new Map(document.modes?.map((mode) => [mode.key, mode]));
  const slots = new Map(document.slots?.map((slot) => [slot.number, slot]));
  const values: Record<string, NativeValue> = { ...base };
  for (const setting of driver.settings) {
    if (!setting.neutral) continue;
    const { scope, number } = setting;
    const part = number === undefined ? document : scope === "mode" ? modes.get(String(number)) : slots.get(number);
    const neutral = look(part, innerPath(setting));
    if (typeof neutral !== "string" && typeof neutral !== "number" && typeof neutral !== "boolean") continue;
    const native = setting.pattern === "slots[*].mode" ? Number(neutral) : toNative(setting.value, neutral);
    if (native !== undefined) values[setting.key] = native;
  }
  return values;
}
