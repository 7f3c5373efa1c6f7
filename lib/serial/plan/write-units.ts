import type { CompiledDriver, CompiledSetting } from "@/lib/serial/driver/compiled";
import type { NativeKey, NativeValue, NativeWrite } from "@/lib/serial/native";

/** What one request writes: one setting, or a block that the device takes as one. `was` stands key by key beside it. */
export type WriteUnit = { readonly writes: readonly NativeWrite[]; readonly was: readonly NativeWrite[] };

type Values = ReadonlyMap<NativeKey, NativeValue>;

/** Settings that travel in one request share this name; null: the setting travels alone. */
function blockName(setting: CompiledSetting): string | null {
  const { wire } = setting.source;
  if (wire.kind !== "packet") return null;
  return `${wire.field.block}#${setting.number ?? ""}`;
}

/** Keys of the driver by the block they travel in. */
function blocksOf(driver: CompiledDriver): ReadonlyMap<string, readonly CompiledSetting[]> {
  const blocks = new Map<string, CompiledSetting[]>();
  for (const setting of driver.settings) {
    const name = blockName(setting);
    if (name !== null) blocks.set(name, [...(blocks.get(name) ?? []), setting]);
  }
  return blocks;
}

/**
 * The requests that bring `from` to `to`, in the driver's order, modes before the slots that use them.
 *
 * A block is written whole, with its values that stay as they are, since its request carries all of them.
 * @param to only keys that differ from `from` make a write
 */
export function writeUnits(driver: CompiledDriver, from: Values, to: ReadonlyMap<NativeKey, NativeValue>): readonly WriteUnit[] {
  const differs = driver.settings.filter(({ key, writable }) => {
    const wanted = to.get(key);
    return writable && wanted !== undefined && from.has(key) && wanted !== from.get(key);
  });
  const blocks = differs.some((setting) => blockName(setting) !== null) ? blocksOf(driver) : new Map();
  const taken = new Set<string>();
  const units = differs.flatMap((setting) => {
    const name = blockName(setting);
    if (name === null) return [unitOf([setting], from, to)];
    if (taken.has(name)) return [];
    taken.add(name);
    const members: readonly CompiledSetting[] = blocks.get(name) ?? [];
    return [unitOf(members.filter(({ key, writable }) => writable && from.has(key)), from, to)];
  });
  const rank = (unit: WriteUnit) => (unit.writes[0]?.key.startsWith("slots[") ? 1 : 0);
  return units.sort((a, b) => rank(a) - rank(b));
}

function unitOf(settings: readonly CompiledSetting[], from: Values, to: Values): WriteUnit {
  const was = settings.map(({ key }) => ({ key, value: from.get(key) ?? "" }));
  return { was, writes: was.map(({ key, value }) => ({ key, value: to.get(key) ?? value })) };
}
