import type { Finding } from "@/lib/profile/finding";
import { modePath } from "@/lib/profile/paths";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { NativeKey, NativeValue, NativeValues } from "@/lib/serial/native";
import { modeOfSlot, rasterOfMode } from "./output-raster";
import type { ModeMove } from "./plan-target";

type Values = ReadonlyMap<NativeKey, NativeValue>;

function modesInUse(driver: CompiledDriver, values: Values): ReadonlySet<number> {
  const { first, count } = driver.definition.slots;
  const slots = Array.from({ length: count }, (_, at) => first + at);
  return new Set(slots.flatMap((slot) => modeOfSlot(driver, values, slot) ?? []));
}

/** The lowest mode that no slot uses before or after, and that the target writes nothing to. */
function lowestFreeMode(driver: CompiledDriver, before: Values, after: Values): number | null {
  const used = new Set([...modesInUse(driver, before), ...modesInUse(driver, after)]);
  const { first, count } = driver.definition.modes;
  for (let mode = first; mode < first + count; mode += 1) {
    const written = driver.settings.some(
      (setting) => setting.scope === "mode" && setting.number === mode && before.get(setting.key) !== after.get(setting.key),
    );
    if (!used.has(mode) && !written) return mode;
  }
  return null;
}

export type FreeModeTarget = { readonly values: NativeValues; readonly move: ModeMove; readonly findings: readonly Finding[] };

/**
 * The same target with the active mode's new timing in a free mode, and every slot that shares it pointed there.
 *
 * The mode itself stays as the backup has it. Null: no mode is free, or the active slot's mode is not what changes.
 * @param before the backup's values
 * @param target values over them
 */
export function toFreeMode(
  driver: CompiledDriver,
  before: NativeValues,
  target: NativeValues,
  activeSlot: number,
): FreeModeTarget | null {
  const [was, wanted] = [new Map(Object.entries(before)), new Map(Object.entries(target))];
  const mode = modeOfSlot(driver, wanted, activeSlot);
  if (mode === null || mode !== modeOfSlot(driver, was, activeSlot)) return null;
  const free = lowestFreeMode(driver, was, wanted);
  if (free === null) return null;
  const values: Record<NativeKey, NativeValue> = { ...target };
  for (const setting of driver.settings) {
    const { key, scope, number, pattern } = setting;
    const value = target[key];
    if (scope === "mode" && number === mode && value !== undefined) {
      const original = before[key];
      values[pattern.replace("[*]", `[${free}]`)] = value;
      if (original !== undefined) values[key] = original;
    }
    if (pattern === "slots[*].mode" && value === mode) values[key] = free;
  }
  const overwritten = rasterOfMode(driver, was, free) !== null;
  return {
    values,
    move: { from: String(mode), to: String(free) },
    findings: [
      {
        rule: "plan.free-mode",
        path: modePath(String(free)),
        severity: "note",
        sentence: `The new timing goes to mode ${free}, and mode ${mode} stays as it is.`,
        detail: `No order of single writes to mode ${mode} keeps every raster between safe for the screen.${overwritten ? ` No slot uses what mode ${free} holds now; the backup keeps it.` : ""}`,
        slots: [],
        remedies: [],
      },
    ],
  };
}
