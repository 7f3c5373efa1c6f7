import type { CompiledDriver, CompiledSetting } from "@/lib/serial/driver/compiled";
import type { NativeKey, NativeValue, NativeValues, NativeWrite } from "@/lib/serial/native";

/** The writes that one request takes to give one setting a value: the setting alone, or its whole block as it stands. */
export type WritesFor = (working: NativeValues, key: NativeKey, value: NativeValue) => readonly NativeWrite[];

const blockOf = ({ source: { wire }, number }: CompiledSetting) => (wire.kind === "packet" ? `${wire.field.block}#${number ?? ""}` : null);

/** Works the blocks out once. */
export function createWritesFor(driver: CompiledDriver): WritesFor {
  const blocks = new Map<string, CompiledSetting[]>();
  for (const setting of driver.settings) {
    const name = blockOf(setting);
    if (name === null) continue;
    const members = blocks.get(name) ?? [];
    members.push(setting);
    blocks.set(name, members);
  }
  return (working, key, value) => {
    const setting = driver.byKey.get(key);
    const name = setting && blockOf(setting);
    const members = name === null || name === undefined ? [] : (blocks.get(name) ?? []);
    if (members.length === 0) return [{ key, value }];
    return members.filter(({ writable }) => writable).map((member) => ({ key: member.key, value: member.key === key ? value : (working[member.key] ?? member.initial) }));
  };
}

/** Values under which no picture can be pushed out of its raster: every slot empty, where the device knows empty slots. */
export function emptySlots({ definition, settings }: CompiledDriver): NativeValues {
  const { emptyMode } = definition.slots;
  if (emptyMode === undefined) return {};
  return Object.fromEntries(settings.filter(({ pattern }) => pattern === "slots[*].mode").map(({ key }) => [key, emptyMode]));
}

/** Values under which every slot can be made active: the first mode in each. */
export function filledSlots({ definition, settings }: CompiledDriver): NativeValues {
  return Object.fromEntries(settings.filter(({ pattern }) => pattern === "slots[*].mode").map(({ key }) => [key, definition.modes.first]));
}

/** A setting that can be written and read back and holds two values at least; of the whole device where there is one. */
export function probeOf(driver: CompiledDriver): { readonly key: NativeKey; readonly before: NativeValue; readonly after: NativeValue } | null {
  const fits = (setting: CompiledSetting) => setting.readable && setting.writable && otherValue(setting) !== null && !/\.mode$|placement|timing|powerOnSlot/u.test(setting.pattern);
  const setting = driver.settings.find((one) => one.scope === "everywhere" && fits(one)) ?? driver.settings.find(fits);
  const after = setting && otherValue(setting);
  return setting && after !== null && after !== undefined ? { key: setting.key, before: setting.initial, after } : null;
}

function otherValue({ value, initial }: CompiledSetting): NativeValue | null {
  if (value.type === "integer" && typeof initial === "number") {
    if (initial + value.step <= value.max) return initial + value.step;
    return initial - value.step >= value.min ? initial - value.step : null;
  }
  if (value.type === "choice") return value.choices.find(({ native }) => native !== initial)?.native ?? null;
  return null;
}
