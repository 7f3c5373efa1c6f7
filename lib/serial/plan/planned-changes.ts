import type { BackupContent } from "@/lib/serial/backup/types";
import type { CompiledDriver, CompiledSetting } from "@/lib/serial/driver/compiled";
import type { NativeValues } from "@/lib/serial/native";
import { modeOfSlot } from "./output-raster";
import type { PlanTarget } from "./plan-target";
import type { CheckedPlan, PlanChange } from "./types";

/** A setting is in a plan only if its value is known, so that it can be put back, and if it can be written. */
function canPlan({ key, readable, writable }: CompiledSetting, backup: BackupContent): boolean {
  return readable && writable && backup.values[key] !== undefined && !backup.unreadable.includes(key);
}

/** Native values that differ between a backup and a target, in the driver's order. */
export function changesOf(driver: CompiledDriver, backup: BackupContent, target: NativeValues): readonly PlanChange[] {
  return driver.settings.flatMap((setting) => {
    const [was, planned] = [backup.values[setting.key], target[setting.key]];
    if (!canPlan(setting, backup) || was === undefined || planned === undefined || was === planned) return [];
    return [{ key: setting.key, ...(setting.neutral ? { neutralPath: setting.key } : {}), was, planned }];
  });
}

/** What the target names and no plan can hold: the device does not say what it has, or takes no other value. */
export function settingsByHand(driver: CompiledDriver, backup: BackupContent, target: PlanTarget): CheckedPlan["byHand"] {
  return driver.settings.flatMap((setting) => {
    const value = target.values[setting.key];
    if (canPlan(setting, backup) || value === undefined || !target.named.has(setting.key) || value === backup.values[setting.key]) return [];
    const owner = setting.scope === "slot" ? `Slot ${setting.number}: ` : setting.scope === "mode" ? `Mode ${setting.number}: ` : "";
    return [{ key: setting.key, label: `${owner}${setting.label}`, value }];
  });
}

/** Slots whose picture changes: by their own values, by those of their mode, or by what acts everywhere. Empty ones show nothing. */
export function changedSlotsOf(
  driver: CompiledDriver,
  before: NativeValues,
  after: NativeValues,
  changes: readonly PlanChange[],
): readonly number[] {
  const { first, count } = driver.definition.slots;
  const values = new Map(Object.entries({ ...before, ...after }));
  const changed = changes.flatMap(({ key }) => driver.byKey.get(key) ?? []);
  const everywhere = changed.some(({ scope, key }) => scope === "everywhere" && key.startsWith("everywhere.trim."));
  return Array.from({ length: count }, (_, at) => first + at).filter((slot) => {
    const mode = modeOfSlot(driver, values, slot);
    if (mode === null) return false;
    return everywhere || changed.some(({ scope, number }) => (scope === "slot" && number === slot) || (scope === "mode" && number === mode));
  });
}
