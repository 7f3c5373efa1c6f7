import type { RasterTiming } from "@/lib/timing/raster";
import type { Clock } from "@/lib/serial/clock";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { ActionName } from "@/lib/serial/driver/definition";
import type { NativeKey, NativeValue } from "@/lib/serial/native";
import type { DeviceMemory } from "./device-memory";
import { DONE, refused, type DeviceAnswer } from "./device-operations";

type Snapshot = { readonly working: ReadonlyMap<NativeKey, NativeValue>; readonly activeSlot: number; readonly latched: RasterTiming | null };

/** The timer by which a device puts its old values back by itself. */
export type DeviceTimer = {
  readonly armed: boolean;
  /** Arming takes the snapshot and replaces an armed one; the other acts are refused when none is armed. */
  act(name: ActionName, seconds: unknown): DeviceAnswer;
  /** A restart ends it. */
  clear(): void;
};

/** @param restored called when it fired: working memory, active slot and the raster that was out are back */
export function createDeviceTimer(driver: CompiledDriver, clock: Clock, memory: DeviceMemory, restored: () => void): DeviceTimer {
  const { deviceTimer } = driver.definition.memory;
  let snapshot: Snapshot | null = null;
  let cancel = () => {};

  function fire(): void {
    if (!snapshot) return;
    for (const [key, value] of snapshot.working) memory.working.set(key, value);
    memory.activeSlot = snapshot.activeSlot;
    memory.latched = snapshot.latched;
    snapshot = null;
    restored();
  }

  return {
    get armed() {
      return snapshot !== null;
    },
    act(name, seconds) {
      if (!deviceTimer) return refused(-113, "Undefined header");
      const timed = name === "armTimer" || name === "extendTimer";
      if (timed && (typeof seconds !== "number" || seconds < 1 || seconds > deviceTimer.maxSeconds)) return refused(-222, "Data out of range");
      if (name !== "armTimer" && snapshot === null) return refused(-221, "Settings conflict, no timer armed");
      cancel();
      if (name === "armTimer") snapshot = { working: new Map(memory.working), activeSlot: memory.activeSlot, latched: memory.latched };
      if (timed) cancel = clock.after(Number(seconds) * 1000, fire);
      else snapshot = null;
      return DONE;
    },
    clear() {
      cancel();
      snapshot = null;
    },
  };
}
