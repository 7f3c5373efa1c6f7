import { patternOf } from "@/lib/profile/paths";
import type { NumberLimit } from "@/lib/profile/limits";
import { toNative, toNeutral } from "@/lib/serial/driver/neutral";
import type { DriverDefinition, DriverSetting } from "@/lib/serial/driver/definition";
import type { NativeKey, NativeValue, NativeValues, NativeWrite } from "@/lib/serial/native";
import type { PlanChange } from "@/lib/serial/plan/types";
import type { Reach } from "@/lib/profile/also-moved";

/** A setting that only this device has: no profile names it, so it is kept and changed as the device's own value. */
export type NativeRow = {
  readonly key: NativeKey;
  readonly setting: DriverSetting;
  readonly now: NativeValue;
  readonly planned: NativeValue;
};

const NATIVE = /^(?:(?:slots|modes)\[\*\]\.)?native\./u;

function reachOf(key: string): Reach {
  if (key.startsWith("slots[*]")) return "slot";
  return key.startsWith("modes[*]") ? "mode" : "everywhere";
}

/** What the device shows for a native value, in the setting's unit. */
export function shownValue({ value }: DriverSetting, native: NativeValue): number | string {
  if (value.type === "choice") return value.choices.find((choice) => choice.native === native)?.label ?? String(native);
  const shown = toNeutral(value, native);
  return typeof shown === "number" ? shown : String(native);
}

/** The range of a whole-number setting as it is shown. */
export function shownRange({ value }: DriverSetting): NumberLimit | undefined {
  if (value.type !== "integer") return undefined;
  const at = (native: number) => native * value.scale + value.offset;
  return { min: at(value.min), max: at(value.max), step: value.step * value.scale, unit: value.unit };
}

/** The native value nearest to what was set on a ruler or chosen from a list. */
export function nativeFromShown({ value }: DriverSetting, shown: number | string): NativeValue | undefined {
  if (value.type === "choice") return value.choices.find((choice) => String(choice.native) === String(shown))?.native;
  return toNative(value, shown);
}

/**
 * The adjustable native settings of one reach.
 *
 * What the device cannot be asked is left out, since its former value is not known; so are texts.
 * @param modeKey the device's number of the chosen slot's mode
 */
export function nativeRows(reach: Reach, driver: DriverDefinition, values: NativeValues, edits: readonly NativeWrite[], slot: number, modeKey: string | undefined): NativeRow[] {
  return driver.settings
    .filter((setting) => NATIVE.test(setting.key) && reachOf(setting.key) === reach && setting.value.type !== "text")
    .flatMap((setting) => {
      if (reach === "mode" && modeKey === undefined) return [];
      const key = setting.key.replace("slots[*]", `slots[${slot}]`).replace("modes[*]", `modes[${modeKey ?? ""}]`);
      const now = values[key];
      return now === undefined ? [] : [{ key, setting, now, planned: edits.find((edit) => edit.key === key)?.value ?? now }];
    });
}

/** The changes of a plan that no document has a word for, with the setting that each is of. */
export function nativeChanges(changes: readonly PlanChange[], driver: DriverDefinition): readonly (PlanChange & { readonly setting: DriverSetting })[] {
  return changes.flatMap((change) => {
    const pattern = patternOf(change.key) ?? change.key;
    const setting = NATIVE.test(pattern) ? driver.settings.find(({ key }) => key === pattern) : undefined;
    return setting ? [{ ...change, setting }] : [];
  });
}
