import type { RasterTiming } from "@/lib/timing/raster";
import { sameRaster } from "@/lib/timing/same-raster";
import type { Clock } from "@/lib/serial/clock";
import { nativeProblem } from "@/lib/serial/driver/compile";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { ActionName } from "@/lib/serial/driver/definition";
import type { NativeKey, NativeValue, NativeWrite } from "@/lib/serial/native";
import { rasterOfSlot } from "@/lib/serial/plan/output-raster";
import { pictureFits } from "@/lib/serial/plan/picture-fits";
import type { DeviceIdentity } from "@/lib/serial/session/types";
import { isCommitted, powerOnSlot, rasterOutOf, slotsPushedOut, type DeviceMemory, type RasterCause } from "./device-memory";
import { DONE, refused, type DeviceAnswer, type DeviceCounts, type DeviceOperation, type OperationFault } from "./device-operations";
import { statusFields } from "./device-status";
import { createDeviceTimer } from "./device-timer";

export type RasterListener = (raster: RasterTiming | null, cause: RasterCause) => void;

/** A device behind its protocol: takes operations, keeps memory, slots, timer and the raster that is out. */
export type DeviceCore = {
  perform(operation: DeviceOperation): DeviceAnswer;
  /** Loses working memory, moves the boot count, puts out what a start puts out until `started`. */
  restart(): void;
  started(): void;
  /** Tells the listeners what is out now, where that changed. */
  settle(cause: RasterCause): void;
  onRaster(listener: RasterListener): () => void;
  counts(): DeviceCounts;
  setFault(faultOf: ((operation: DeviceOperation) => OperationFault | undefined) | null): void;
  readonly timerArmed: boolean;
};

const NEVER = () => undefined;

export function createDeviceCore(driver: CompiledDriver, memory: DeviceMemory, clock: Clock, identity: DeviceIdentity): DeviceCore {
  const { definition } = driver;
  const listeners = new Set<RasterListener>();
  const counts = { reads: 0, writes: 0, recalls: 0, commits: 0, timerActs: 0, refusals: 0, stored: {} as Record<NativeKey, number>, readsByKey: {} as Record<NativeKey, number>, writesByKey: {} as Record<NativeKey, number> };
  let faultOf: (operation: DeviceOperation) => OperationFault | undefined = NEVER;
  let lastOut = rasterOutOf(driver, memory);

  const tally = (table: Record<NativeKey, number>, key: NativeKey) => {
    table[key] = (table[key] ?? 0) + 1;
  };

  function settle(cause: RasterCause): void {
    const out = rasterOutOf(driver, memory);
    const same = out === null || lastOut === null ? out === lastOut : sameRaster(out, lastOut);
    if (same) return;
    lastOut = out;
    for (const listener of [...listeners]) listener(out, cause);
  }

  /** Takes the active slot's mode as working memory has it. */
  function latch(cause: RasterCause): void {
    memory.latched = rasterOfSlot(driver, memory.working, memory.activeSlot);
    settle(cause);
  }

  function store(key: NativeKey, value: NativeValue): void {
    if (memory.stored.get(key) === value) return;
    memory.stored.set(key, value);
    tally(counts.stored, key);
  }

  function writeProblem(writes: readonly NativeWrite[]): DeviceAnswer | null {
    for (const { key, value } of writes) {
      const setting = driver.byKey.get(key);
      if (!setting?.writable) return refused(-113, "Undefined header");
      const problem = nativeProblem(setting.value, value);
      if (problem) return refused(setting.value.type === "integer" ? -222 : -224, setting.value.type === "integer" ? "Data out of range" : "Illegal parameter value");
    }
    if (definition.output.outsideRaster === "refuses" && slotsPushedOut(driver, memory, writes).length > 0) return refused(-221, "Settings conflict, outside raster");
    return null;
  }

  function write(writes: readonly NativeWrite[], fault: OperationFault | undefined): DeviceAnswer {
    const problem = writeProblem(writes);
    if (problem) return problem;
    for (const { key } of writes) tally(counts.writesByKey, key);
    counts.writes += 1;
    if (fault?.kind === "ignore") return DONE;
    const kept = fault?.kind === "torn" ? writes.slice(0, fault.stored) : writes;
    for (const { key, value } of kept) {
      const held = fault?.kind === "store-other" ? otherValue(key, value) : value;
      memory.working.set(key, held);
      if (!definition.memory.volatileWrites) store(key, held);
    }
    if (definition.timingTakesEffect !== "recall") latch("write");
    return { kind: "values", values: Object.fromEntries(writes.map(({ key, value }) => [key, value])), fields: {} };
  }

  /** Any other value that the setting can hold; the same one where it can hold no other. */
  function otherValue(key: NativeKey, value: NativeValue): NativeValue {
    const setting = driver.byKey.get(key)?.value;
    if (setting?.type === "integer" && typeof value === "number") return value + setting.step <= setting.max ? value + setting.step : value - setting.step;
    if (setting?.type === "choice") return setting.choices.find((choice) => choice.native !== value)?.native ?? value;
    return setting?.type === "text" ? String(value).slice(0, -1) : value;
  }

  function recall(slot: unknown): DeviceAnswer {
    const { first, count, emptyMode } = definition.slots;
    if (typeof slot !== "number" || slot < first || slot >= first + count) return refused(-222, "Data out of range");
    if (emptyMode !== undefined && memory.working.get(`slots[${slot}].mode`) === emptyMode) return refused(-221, "Settings conflict, empty slot");
    if (definition.output.outsideRaster === "refuses" && !pictureFits(driver, memory.working, slot)) return refused(-221, "Settings conflict, outside raster");
    counts.recalls += 1;
    memory.activeSlot = slot;
    latch("recall");
    return DONE;
  }

  function commit(fault: OperationFault | undefined): DeviceAnswer {
    counts.commits += 1;
    if (fault?.kind === "ignore") return DONE;
    const changed = [...memory.working].filter(([key, value]) => memory.stored.get(key) !== value);
    for (const [key, value] of fault?.kind === "torn" ? changed.slice(0, fault.stored) : changed) store(key, value);
    return DONE;
  }

  const timer = createDeviceTimer(driver, clock, memory, () => settle("timer"));

  function actTimer(name: ActionName, seconds: unknown): DeviceAnswer {
    const answer = timer.act(name, seconds);
    if (answer.kind !== "refused") counts.timerActs += 1;
    return answer;
  }

  function act(operation: Extract<DeviceOperation, { kind: "action" }>, fault: OperationFault | undefined): DeviceAnswer {
    switch (operation.name) {
      case "recall":
        return recall(operation.fields["slot"]);
      case "commit":
        return commit(fault);
      case "muteOn":
      case "muteOff":
        memory.muted = operation.name === "muteOn";
        settle("mute");
        return DONE;
      default:
        return actTimer(operation.name, operation.fields["seconds"]);
    }
  }

  function serve(operation: DeviceOperation, fault: OperationFault | undefined): DeviceAnswer {
    switch (operation.kind) {
      case "read": {
        counts.reads += 1;
        for (const key of operation.keys) tally(counts.readsByKey, key);
        return { kind: "values", values: Object.fromEntries(operation.keys.map((key) => [key, memory.working.get(key) ?? ""])), fields: {} };
      }
      case "write":
        return write(operation.writes, fault);
      case "status":
        return { kind: "values", values: {}, fields: statusFields(driver, memory, operation.name, identity, rasterOutOf(driver, memory), isCommitted(memory)) };
      case "action":
        return act(operation, fault);
    }
  }

  return {
    perform(operation) {
      const fault = faultOf(operation);
      if (fault?.kind === "busy") return { kind: "busy" };
      const answer = fault?.kind === "refuse" ? refused(-200, "Execution error") : serve(operation, fault);
      if (answer.kind === "refused") counts.refusals += 1;
      return fault?.kind === "silent" ? { kind: "silent" } : answer;
    },
    restart() {
      timer.clear();
      memory.bootCount += 1;
      memory.muted = false;
      for (const [key, value] of memory.stored) memory.working.set(key, value);
      memory.activeSlot = powerOnSlot(driver, memory);
      memory.latched = rasterOfSlot(driver, memory.working, memory.activeSlot);
      memory.starting = true;
      settle("switch-on");
    },
    started() {
      memory.starting = false;
      settle("started");
    },
    settle,
    onRaster(listener) {
      listeners.add(listener);
      return () => void listeners.delete(listener);
    },
    counts: () => ({ ...counts, stored: { ...counts.stored }, readsByKey: { ...counts.readsByKey }, writesByKey: { ...counts.writesByKey } }),
    setFault(next) {
      faultOf = next ?? NEVER;
    },
    get timerArmed() {
      return timer.armed;
    },
  };
}
