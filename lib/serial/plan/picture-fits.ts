import { outsideRaster } from "@/lib/profile/fit-placement";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { toNeutral } from "@/lib/serial/driver/neutral";
import type { NativeKey, NativeValue } from "@/lib/serial/native";
import { modeOfSlot, rasterOfMode } from "./output-raster";
import type { WriteUnit } from "./write-units";

function staysInside(active: number, sizePct: number, offset: number): boolean {
  const { before, after } = outsideRaster(active, sizePct, offset);
  return before === 0 && after === 0;
}

type Values = ReadonlyMap<NativeKey, NativeValue>;

/** Whether a slot's picture lies inside its mode's active raster. An empty slot has no picture to lie outside. */
export function pictureFits(driver: CompiledDriver, values: Values, slot: number): boolean {
  const mode = modeOfSlot(driver, values, slot);
  const raster = mode === null ? null : rasterOfMode(driver, values, mode);
  if (raster === null) return true;
  const number = (part: string, absent: number) => {
    const key = `slots[${slot}].placement.${part}`;
    const setting = driver.byKey.get(key);
    const native = values.get(key);
    return setting === undefined || native === undefined ? absent : Number(toNeutral(setting.value, native));
  };
  return (
    staysInside(raster.horizontal.active, number("widthPct", 100), number("offsetPx", 0)) &&
    staysInside(raster.vertical.active, number("heightPct", 100), number("offsetLines", 0))
  );
}

/** Slots whose picture a write can push out of its raster: by its placement, its mode, or its mode's size. */
export function slotsTouched(driver: CompiledDriver, values: Values, unit: WriteUnit): readonly number[] {
  const slots = new Set<number>();
  const { first, count } = driver.definition.slots;
  for (const { key } of unit.writes) {
    const setting = driver.byKey.get(key);
    if (setting?.number === undefined) continue;
    if (setting.scope === "slot" && /^slots\[\*\]\.(?:mode$|placement\.)/u.test(setting.pattern)) slots.add(setting.number);
    if (setting.scope !== "mode" || !/\.(?:active|interlaced)$/u.test(setting.pattern)) continue;
    for (let slot = first; slot < first + count; slot += 1) {
      if (modeOfSlot(driver, values, slot) === setting.number) slots.add(slot);
    }
  }
  return [...slots];
}
