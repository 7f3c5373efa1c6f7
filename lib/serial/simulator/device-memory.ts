import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";
import { fieldRateHz } from "@/lib/timing/rates";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { NativeKey, NativeValue, NativeValues, NativeWrite } from "@/lib/serial/native";
import { rasterOfSlot } from "@/lib/serial/plan/output-raster";
import { pictureFits } from "@/lib/serial/plan/picture-fits";

/** Why the raster that is out changed. */
export type RasterCause = "switch-on" | "started" | "write" | "recall" | "timer" | "source" | "mute";

/** Memory and output of one device, without time: what its settings are, which slot is on, which raster is out. */
export type DeviceMemory = {
  readonly working: Map<NativeKey, NativeValue>;
  readonly stored: Map<NativeKey, NativeValue>;
  activeSlot: number;
  /** The active slot's raster as it took effect; what is out follows from it and from what arrives. */
  latched: RasterTiming | null;
  source: SourceFormat | null;
  muted: boolean;
  starting: boolean;
  bootCount: number;
};

/** A new device's memory: the driver's initial values under `values`. */
export function createMemory(driver: CompiledDriver, values: NativeValues, activeSlot: number | undefined): DeviceMemory {
  const initial = new Map(driver.settings.map((setting) => [setting.key, values[setting.key] ?? setting.initial]));
  const memory: DeviceMemory = {
    working: new Map(initial), stored: initial, activeSlot: 0, latched: null, source: null, muted: false, starting: false, bootCount: 1,
  };
  memory.activeSlot = activeSlot ?? powerOnSlot(driver, memory);
  memory.latched = rasterOfSlot(driver, memory.working, memory.activeSlot);
  return memory;
}

/** The slot that is on after a start: the setting where the driver has one, else the first. */
export function powerOnSlot(driver: CompiledDriver, memory: DeviceMemory): number {
  const slot = memory.stored.get("everywhere.powerOnSlot");
  return typeof slot === "number" ? slot : driver.definition.slots.first;
}

/** The raster that is out: null where nothing is, or nobody knows what. */
export function rasterOutOf(driver: CompiledDriver, memory: DeviceMemory): RasterTiming | null {
  const { idle } = driver.definition.output;
  const known = (raster: RasterTiming | "unknown") => (raster === "unknown" ? null : raster);
  if (memory.muted) return null;
  if (memory.starting) return known(idle.switchOn);
  if (memory.source === null) return known(idle.withoutInput);
  return driver.definition.output.clock === "input" && memory.latched ? atFieldRate(memory.latched, memory.source.fieldRateHz) : memory.latched;
}

/** The same counts at another clock: an output that is locked to its input runs at the rate that arrives. */
function atFieldRate(raster: RasterTiming, wantedHz: number): RasterTiming {
  return { ...raster, pixelClockHz: Math.round((raster.pixelClockHz * wantedHz) / fieldRateHz(raster)) };
}

/** Slots whose picture one of these writes can push out of its raster. */
function slotsTouched(driver: CompiledDriver, memory: DeviceMemory, writes: readonly NativeWrite[]): number[] {
  const { first, count } = driver.definition.slots;
  const all = Array.from({ length: count }, (_, index) => first + index);
  const touched = new Set<number>();
  for (const { key } of writes) {
    const setting = driver.byKey.get(key);
    if (setting?.scope === "slot" && setting.number !== undefined) touched.add(setting.number);
    if (setting?.scope === "mode") all.filter((slot) => memory.working.get(`slots[${slot}].mode`) === setting.number).forEach((slot) => touched.add(slot));
  }
  return [...touched];
}

/** The slots whose picture would leave its raster by these writes and lies inside it now. */
export function slotsPushedOut(driver: CompiledDriver, memory: DeviceMemory, writes: readonly NativeWrite[]): number[] {
  const after = new Map(memory.working);
  for (const { key, value } of writes) after.set(key, value);
  return slotsTouched(driver, memory, writes).filter((slot) => pictureFits(driver, memory.working, slot) && !pictureFits(driver, after, slot));
}

/** Working and non-volatile memory hold the same. */
export function isCommitted(memory: DeviceMemory): boolean {
  return [...memory.working].every(([key, value]) => memory.stored.get(key) === value);
}
