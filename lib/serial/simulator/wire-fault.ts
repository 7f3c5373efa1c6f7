import type { UnplugOrder } from "./far-end";
import type { ReadFault, WriteFault } from "./port-faults";

export type WireDirection = "host-to-device" | "device-to-host";

/** What one byte on the line meets. */
export type ByteFate =
  | { readonly kind: "pass" }
  /** What arrives in the byte's place: nothing, another byte, more bytes. */
  | { readonly kind: "replace"; readonly bytes: readonly number[] }
  /** The byte and all after it come so much later. */
  | { readonly kind: "delay"; readonly delayMs: number }
  /** Nothing arrives any more this way, until the line is released. */
  | { readonly kind: "stall" }
  /** The byte is lost, and something happens at the port or the device. */
  | { readonly kind: "event"; readonly event: WireEvent };

export type WireEvent =
  | { readonly kind: "unplug"; readonly order: UnplugOrder }
  | { readonly kind: "read-error"; readonly fault: ReadFault }
  | { readonly kind: "write-error"; readonly fault: WriteFault }
  | { readonly kind: "restart" };

/** Decides on each byte as it leaves the line. `byteIndex` counts from 0 since the wire was made, each way by itself. */
export interface WireFault {
  onByte(byte: number, byteIndex: number, direction: WireDirection): ByteFate;
}

/** A single fault, as a script names it. */
export type ByteFault =
  | { readonly kind: "drop" }
  /** Bits to turn over, 1 to 255. */
  | { readonly kind: "flip"; readonly mask: number }
  /** A byte that comes before. */
  | { readonly kind: "insert"; readonly byte: number }
  | { readonly kind: "duplicate" }
  | { readonly kind: "delay"; readonly delayMs: number }
  | { readonly kind: "stall" }
  | { readonly kind: "unplug"; readonly order?: UnplugOrder }
  /** Parity, framing, break, overrun or an unexplained error where the byte stood. */
  | { readonly kind: "read-error"; readonly fault: Exclude<ReadFault, "lost"> }
  | { readonly kind: "write-error" }
  | { readonly kind: "restart" };

const PASS: ByteFate = { kind: "pass" };

/** What `fault` does to `byte`. */
export function fateOf(fault: ByteFault, byte: number): ByteFate {
  switch (fault.kind) {
    case "drop":
      return { kind: "replace", bytes: [] };
    case "flip":
      return { kind: "replace", bytes: [byte ^ fault.mask] };
    case "insert":
      return { kind: "replace", bytes: [fault.byte, byte] };
    case "duplicate":
      return { kind: "replace", bytes: [byte, byte] };
    case "delay":
    case "stall":
      return fault;
    case "unplug":
      return { kind: "event", event: { kind: "unplug", order: fault.order ?? "stream-first" } };
    case "write-error":
      return { kind: "event", event: { kind: "write-error", fault: "system" } };
    case "read-error":
    case "restart":
      return { kind: "event", event: fault };
  }
}

/** A fault that strikes once, at one byte. */
export interface SingleFault extends WireFault {
  /** Whether the byte was reached: a sweep over n stops at the first n where it was not. */
  readonly fired: boolean;
}

/** Strikes at the byte `byteIndex` (from 0) of one direction, once. */
export function faultAtByte(direction: WireDirection, byteIndex: number, fault: ByteFault): SingleFault {
  let fired = false;
  return {
    get fired() {
      return fired;
    },
    onByte(byte, index, way) {
      if (fired || way !== direction || index !== byteIndex) return PASS;
      fired = true;
      return fateOf(fault, byte);
    },
  };
}

/** Asks several faults in turn; the first that does not let the byte pass decides. */
export function anyOf(faults: readonly WireFault[]): WireFault {
  return {
    onByte(byte, index, direction) {
      for (const fault of faults) {
        const fate = fault.onByte(byte, index, direction);
        if (fate.kind !== "pass") return fate;
      }
      return PASS;
    },
  };
}
