import { rasterProblems } from "@/lib/timing/raster-problems";
import { sameRaster } from "@/lib/timing/same-raster";
import type { AxisTiming, Polarity, RasterTiming } from "@/lib/timing/raster";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { toNeutral } from "@/lib/serial/driver/neutral";
import type { NativeKey, NativeValue } from "@/lib/serial/native";

type Values = ReadonlyMap<NativeKey, NativeValue>;

function neutralAt(driver: CompiledDriver, values: Values, key: NativeKey): unknown {
  const setting = driver.byKey.get(key);
  const native = values.get(key);
  if (setting === undefined || native === undefined) return undefined;
  return toNeutral(setting.value, native);
}

/** The number of the mode that a slot puts out; null where the slot is empty or its mode is not known. */
export function modeOfSlot(driver: CompiledDriver, values: Values, slot: number): number | null {
  const mode = values.get(`slots[${slot}].mode`);
  return typeof mode === "number" && mode !== driver.definition.slots.emptyMode ? mode : null;
}

function axisOf(driver: CompiledDriver, values: Values, path: string): AxisTiming | null {
  const number = (part: string) => Number(neutralAt(driver, values, `${path}.${part}`) ?? 0);
  const polarity = neutralAt(driver, values, `${path}.polarity`);
  if (neutralAt(driver, values, `${path}.active`) === undefined) return null;
  return {
    active: number("active"),
    frontPorch: number("frontPorch"),
    sync: number("sync"),
    backPorch: number("backPorch"),
    // A device that has no word for polarity sends what composite sync is: negative.
    polarity: (polarity === "positive" ? "positive" : "negative") satisfies Polarity,
  };
}

/** The raster that a mode's native values make; null where the device does not hold a whole one. */
export function rasterOfMode(driver: CompiledDriver, values: Values, mode: number): RasterTiming | null {
  const path = `modes[${mode}].timing`;
  const horizontal = axisOf(driver, values, `${path}.horizontal`);
  const vertical = axisOf(driver, values, `${path}.vertical`);
  const pixelClockHz = neutralAt(driver, values, `${path}.pixelClockHz`);
  if (horizontal === null || vertical === null || typeof pixelClockHz !== "number") return null;
  const equalFields = neutralAt(driver, values, `${path}.equalFields`) === true;
  return {
    pixelClockHz,
    interlaced: neutralAt(driver, values, `${path}.interlaced`) === true,
    ...(equalFields ? { equalFields } : {}),
    horizontal,
    vertical,
  };
}

/** What a slot puts out when it is on: null where it is empty or its mode makes no raster at all. */
export function rasterOfSlot(driver: CompiledDriver, values: Values, slot: number): RasterTiming | null {
  const mode = modeOfSlot(driver, values, slot);
  return mode === null ? null : rasterOfMode(driver, values, mode);
}

/** Two outputs that show the same: the same raster, or nothing. */
export function sameOutput(a: RasterTiming | null, b: RasterTiming | null): boolean {
  if (a === null || b === null) return a === b;
  return sameRaster(a, b);
}

/** What a device puts out while nothing arrives: its settings cannot be told from it. */
export function isIdleOutput(driver: CompiledDriver, out: RasterTiming | null): boolean {
  const { withoutInput } = driver.definition.output.idle;
  return sameOutput(out, withoutInput === "unknown" ? null : withoutInput);
}

/**
 * What the settings put out, told from what was read at the output: undefined where it does not tell, since the device
 * cannot be asked or nothing arrives.
 */
export function readOutput(driver: CompiledDriver, out: RasterTiming | null | undefined): RasterTiming | null | undefined {
  if (driver.definition.timingTakesEffect !== "recall" || out === undefined || isIdleOutput(driver, out)) return undefined;
  return out;
}

/** A raster without fractions, wrong signs or contradictions. */
export function isWholeRaster(timing: RasterTiming): boolean {
  return rasterProblems(timing).length === 0;
}
