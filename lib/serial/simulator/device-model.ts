import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";
import type { Clock } from "@/lib/serial/clock";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { NativeValues } from "@/lib/serial/native";
import type { DeviceIdentity } from "@/lib/serial/session/types";
import { createDeviceCore, type RasterListener } from "./device-core";
import type { FaceMaker } from "./device-face";
import { createMemory, isCommitted, rasterOutOf } from "./device-memory";
import type { DeviceModel } from "./device-model-interface";
import type { DeviceAnswer, DeviceCounts, DeviceOperation, OperationFault } from "./device-operations";
import { inputLocks } from "./device-status";
import { createModbusFace } from "./modbus-face";
import { createPacketFace } from "./packet-face";
import { createTextFace } from "./text-face";

export type DeviceModelOptions = {
  readonly clock: Clock;
  /** Over the driver's factory values, in working and non-volatile memory alike. */
  readonly values?: NativeValues | undefined;
  readonly serialNumber?: string | undefined;
  readonly firmware?: string | undefined;
  /** What arrives; null: nothing does. 1280 × 720 progressive at 60 Hz by default. */
  readonly source?: SourceFormat | null | undefined;
  /** The slot that is on at first; by default the one of the device's own setting. */
  readonly activeSlot?: number | undefined;
  /** How often it was started before, this time included; 1 by default. */
  readonly bootCount?: number | undefined;
};

/** A simulated device: bytes on one side, and on the other what only a simulated device can show. */
export interface SimulatedDevice extends DeviceModel {
  readonly driver: CompiledDriver;
  readonly identity: DeviceIdentity;
  readonly working: NativeValues;
  readonly stored: NativeValues;
  readonly activeSlot: number;
  readonly rasterOut: RasterTiming | null;
  readonly source: SourceFormat | null;
  readonly locked: boolean;
  readonly committed: boolean;
  readonly bootCount: number;
  readonly timerArmed: boolean;
  readonly muted: boolean;
  /** The device starts and does not answer yet. */
  readonly starting: boolean;
  readonly counts: DeviceCounts;
  setSource(source: SourceFormat | null): void;
  /** A hand at the front panel: does what a request would do, and counts alike. */
  operate(operation: DeviceOperation): DeviceAnswer;
  /** Decides for each operation whether and how it goes wrong; null ends that. */
  setFault(faultOf: ((operation: DeviceOperation) => OperationFault | undefined) | null): void;
  /** Each raster that comes out, when it does, and why. Returns what takes the listener back. */
  onRaster(listener: RasterListener): () => void;
  /** After anything that may have changed. */
  onChange(listener: () => void): () => void;
}

const DEFAULT_SOURCE: SourceFormat = { activePx: 1280, activeLines: 720, interlaced: false, fieldRateHz: 60 };

const FACES: Readonly<Record<CompiledDriver["codec"]["kind"], FaceMaker>> = { text: createTextFace, "modbus-rtu": createModbusFace, packet: createPacketFace };

/** Makes a device from a driver, as new or with given values. */
export function createDeviceModel(driver: CompiledDriver, options: DeviceModelOptions): SimulatedDevice {
  const { definition } = driver;
  const { clock } = options;
  const identity: DeviceIdentity = {
    maker: definition.maker, model: definition.model, firmware: options.firmware ?? definition.firmware.max,
    serialNumber: options.serialNumber ?? `${definition.model.replace(/[^A-Za-z0-9]/gu, "")}-0001`,
  };
  const memory = createMemory(driver, options.values ?? {}, options.activeSlot);
  memory.bootCount = options.bootCount ?? 1;
  memory.source = options.source === undefined ? DEFAULT_SOURCE : options.source;
  const core = createDeviceCore(driver, memory, clock, identity);
  const changed = new Set<() => void>();
  const tell = () => [...changed].forEach((listener) => listener());
  core.onRaster(tell);

  let send: (bytes: Uint8Array) => void = () => {};
  let endStart = () => {};
  const perform = (operation: DeviceOperation) => {
    const answer = core.perform(operation);
    if (operation.kind === "write" || operation.kind === "action") tell();
    return answer;
  };
  const face = FACES[driver.codec.kind]({ driver, clock, perform, send: (bytes) => send(bytes) });

  function restart(): void {
    endStart();
    face.reset();
    core.restart();
    for (const line of definition.boot.chatter) send(face.chatter(line));
    const started = () => {
      core.started();
      tell();
    };
    tell();
    if (definition.boot.takesMs === 0) started();
    else endStart = clock.after(definition.boot.takesMs, started);
  }

  return {
    driver,
    identity,
    get working() {
      return Object.fromEntries(memory.working);
    },
    get stored() {
      return Object.fromEntries(memory.stored);
    },
    get activeSlot() {
      return memory.activeSlot;
    },
    get rasterOut() {
      return rasterOutOf(driver, memory);
    },
    get source() {
      return memory.source;
    },
    get locked() {
      return inputLocks(driver, memory);
    },
    get committed() {
      return isCommitted(memory);
    },
    get bootCount() {
      return memory.bootCount;
    },
    get timerArmed() {
      return core.timerArmed;
    },
    get muted() {
      return memory.muted;
    },
    get starting() {
      return memory.starting;
    },
    get counts() {
      return core.counts();
    },
    setSource(source) {
      memory.source = source;
      core.settle("source");
      tell();
    },
    operate: perform,
    setFault: core.setFault,
    onRaster: core.onRaster,
    onChange(listener) {
      changed.add(listener);
      return () => void changed.delete(listener);
    },
    attach(next) {
      send = next;
    },
    receive(bytes) {
      // A device that starts hears nothing.
      if (!memory.starting) face.receive(bytes);
    },
    powerCycle: restart,
    restart,
  };
}
