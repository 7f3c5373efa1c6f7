import type { RasterTiming } from "@/lib/timing/raster";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { NativeKey, NativeValue, NativeValues, NativeWrite } from "@/lib/serial/native";
import { rasterOfSlot, readOutput } from "./output-raster";
import type { PlanStep } from "./types";

/**
 * A device on paper: what it holds, which slot is on, which raster is out. Orders of writes are tried on it.
 *
 * It changes in place, so that a search can take a write back without copying hundreds of values.
 */
export type DeviceImage = {
  readonly driver: CompiledDriver;
  readonly values: Map<NativeKey, NativeValue>;
  activeSlot: number;
  /** What the slot and its mode put out, muted or not. */
  raster: RasterTiming | null;
  muted: boolean;
};

/** @param at.rasterOut what was read at the output; where that does not tell, it follows from the active slot's mode */
export function deviceImage(
  driver: CompiledDriver,
  at: { readonly values: NativeValues; readonly activeSlot: number; readonly rasterOut?: RasterTiming | null | undefined },
): DeviceImage {
  const values = new Map(Object.entries(at.values));
  const out = readOutput(driver, at.rasterOut);
  const raster = out === undefined ? rasterOfSlot(driver, values, at.activeSlot) : out;
  return { driver, values, activeSlot: at.activeSlot, raster, muted: false };
}

/** A second image that changes apart from the first. */
export function copyImage(image: DeviceImage): DeviceImage {
  return { ...image, values: new Map(image.values) };
}

/** What the screen gets: null where nothing is put out. */
export function outputOf(image: DeviceImage): RasterTiming | null {
  return image.muted ? null : image.raster;
}

/** Writes take effect at once on `write` and `block` devices; on `recall` devices the raster waits for a recall. */
export function applyWrites(image: DeviceImage, writes: readonly NativeWrite[]): void {
  for (const { key, value } of writes) image.values.set(key, value);
  if (image.driver.definition.timingTakesEffect === "recall") return;
  image.raster = rasterOfSlot(image.driver, image.values, image.activeSlot);
}

export function applyRecall(image: DeviceImage, slot: number): void {
  image.activeSlot = slot;
  image.raster = rasterOfSlot(image.driver, image.values, slot);
}

/** A step without what is out after it: the image says that. */
export type BareStep =
  | { readonly kind: "write"; readonly writes: readonly NativeWrite[]; readonly was: readonly NativeWrite[] }
  | { readonly kind: "recall"; readonly slot: number; readonly why: "take-effect" | "step-aside" | "return" }
  | { readonly kind: "mute"; readonly on: boolean };

/** Applies a step and gives it with the raster that is out after it. */
export function takeStep(image: DeviceImage, step: BareStep): PlanStep {
  if (step.kind === "write") applyWrites(image, step.writes);
  if (step.kind === "recall") applyRecall(image, step.slot);
  if (step.kind === "mute") image.muted = step.on;
  return { ...step, rasterAfter: outputOf(image) };
}
