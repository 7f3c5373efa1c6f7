import type { Clock } from "@/lib/serial/clock";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { DeviceAnswer, DeviceOperation } from "./device-operations";

/** A device's side of a protocol: bytes in, operations on the core, bytes out. */
export interface DeviceFace {
  receive(bytes: Uint8Array): void;
  /** Forgets what is half received and what waits: a restart. */
  reset(): void;
  /** What the device says unasked (boot chatter), as bytes. */
  chatter(line: string): Uint8Array;
}

export type FaceMaker = (parts: {
  readonly driver: CompiledDriver;
  readonly clock: Clock;
  readonly perform: (operation: DeviceOperation) => DeviceAnswer;
  readonly send: (bytes: Uint8Array) => void;
}) => DeviceFace;
