import type { Clock } from "@/lib/serial/clock";
import type { SerialOpenOptions } from "@/lib/serial/port";
import { ByteQueue } from "./byte-queue";
import type { DeviceModel } from "./device-model-interface";
import { characterMs } from "@/lib/serial/protocols/character-time";
import { PacedLine } from "./wire";
import type { WireEvent, WireFault } from "./wire-fault";

/** What a host may have sent ahead of the line's speed: past that the stream it comes from has to wait. */
const AHEAD_BYTES = 65_536;
/** What a device has said and not yet sent; more is lost, as in any transmitter that nobody holds back. */
const DEVICE_BUFFER_BYTES = 65_536;

export type WiredDeviceOptions = {
  readonly model: DeviceModel;
  readonly transport: SerialOpenOptions;
  readonly clock: Clock;
  readonly pacing: "wire" | "none";
  /** Bytes that leave the device's end of the line, when they are due. */
  readonly onBytes: (bytes: Uint8Array) => void;
  readonly fault?: WireFault;
  /** See `LineOptions`. */
  readonly grainMs?: number;
};

/** A device with its line and no port: for byte streams outside the browser, which have no pace of their own. */
export interface WiredDevice {
  /** Bytes from the host enter the line. @returns false where the line has enough for now: `whenRoom` says when to go on */
  hear(bytes: Uint8Array): boolean;
  whenRoom(fire: () => void): void;
  /** Nobody listens: what is on the line either way is lost. The device keeps its state. */
  hangUp(): void;
}

export function createWiredDevice({
  model,
  transport,
  clock,
  pacing,
  onBytes,
  fault,
  grainMs,
}: WiredDeviceOptions): WiredDevice {
  const toDevice = new ByteQueue();
  const toHost = new ByteQueue();
  let room: (() => void) | null = null;
  const shared = {
    clock,
    grainMs,
    fault: () => fault ?? null,
    onEvent: (event: WireEvent) => {
      if (event.kind === "restart") model.restart();
      else if (event.kind === "unplug") hangUp();
    },
  };
  const sourceOf = (queue: ByteQueue) => ({
    get available() {
      return queue.length;
    },
    takeByte: () => queue.takeByte(),
  });
  const lineOut = new PacedLine({ ...shared, direction: "device-to-host", source: sourceOf(toHost), deliver: onBytes });
  const lineIn = new PacedLine({
    ...shared,
    direction: "host-to-device",
    source: sourceOf(toDevice),
    deliver: (bytes) => {
      model.receive(bytes);
      if (toDevice.length < AHEAD_BYTES) wakeSender();
    },
  });
  for (const line of [lineIn, lineOut]) line.setPace(pacing === "wire" ? characterMs(transport) : 0);
  model.attach((bytes) => {
    if (toHost.length + bytes.length > DEVICE_BUFFER_BYTES) return;
    toHost.push(bytes);
    lineOut.wake();
  });

  function wakeSender(): void {
    const fire = room;
    room = null;
    fire?.();
  }

  function hangUp(): void {
    lineIn.stop();
    lineOut.stop();
    toDevice.clear();
    toHost.clear();
    wakeSender();
  }

  return {
    hear(bytes) {
      toDevice.push(bytes);
      lineIn.wake();
      return toDevice.length < AHEAD_BYTES;
    },
    whenRoom(fire) {
      room = fire;
    },
    hangUp,
  };
}
