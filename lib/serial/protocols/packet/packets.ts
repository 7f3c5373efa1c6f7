import type { Frame, FrameDecoder } from "@/lib/serial/driver/compiled";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import { checkBits, checkOf } from "@/lib/serial/protocols/checksum";
import { hexOf } from "@/lib/serial/wire-log";

export type PacketProtocol = Extract<DriverDefinition["protocol"], { kind: "packet" }>;

/** What a payload begins with: an order, its block, and which of its repeats. A reply has `REPLY_BIT` in the order. */
export const READ_BLOCK = 0x01;
export const WRITE_BLOCK = 0x02;
export const REPLY_BIT = 0x80;
/** Refusal: this, then the order, the block and the repeat that it answers, then a reason. */
export const REFUSED = 0xff;
export const REASONS: Readonly<Record<number, string>> = { 1: "unknown order", 2: "unknown block", 3: "value out of range", 4: "settings conflict", 5: "wrong length", 6: "busy" };
export const BUSY_REASON = 6;

/** Byte stuffing. Source: RFC 1055: END 300, ESC 333, ESC_END 334, ESC_ESC 335 (octal). */
const END = 0xc0;
const ESC = 0xdb;
const ESC_END = 0xdc;
const ESC_ESC = 0xdd;

/** Payload of the largest block and what stands before it. */
const MAX_PAYLOAD = 1100;

function stuff(bytes: readonly number[]): number[] {
  return [END, ...bytes.flatMap((byte) => (byte === END ? [ESC, ESC_END] : byte === ESC ? [ESC, ESC_ESC] : [byte])), END];
}

/** Bytes between two END bytes without their stuffing; null where an escape stands before anything but its two bytes. */
function unstuff(bytes: readonly number[]): number[] | null {
  const plain: number[] = [];
  for (let at = 0; at < bytes.length; at += 1) {
    const byte = bytes[at] ?? 0;
    if (byte !== ESC) plain.push(byte);
    else {
      at += 1;
      if (bytes[at] !== ESC_END && bytes[at] !== ESC_ESC) return null;
      plain.push(bytes[at] === ESC_END ? END : ESC);
    }
  }
  return plain;
}

/** The bytes of a number in the protocol's order. */
export function orderedBytes(protocol: PacketProtocol, value: number, count: number): number[] {
  const bytes = Array.from({ length: count }, (_, index) => Math.floor(value / 256 ** (count - 1 - index)) % 256);
  return protocol.byteOrder === "big" ? bytes : bytes.reverse();
}

/** A packet: start bytes, length of the payload, payload, check over length and payload. */
export function sealPacket(protocol: PacketProtocol, payload: readonly number[]): Uint8Array {
  const checked = [...orderedBytes(protocol, payload.length, protocol.lengthBytes), ...payload];
  const check = checkOf(protocol.checksum, Uint8Array.from(checked));
  const packet = [...protocol.start, ...checked, ...orderedBytes(protocol, check, checkBits(protocol.checksum) / 8)];
  return Uint8Array.from(protocol.stuffing ? stuff(packet) : packet);
}

function lengthAt(protocol: PacketProtocol, packet: readonly number[]): number {
  const digits = packet.slice(protocol.start.length, protocol.start.length + protocol.lengthBytes);
  return (protocol.byteOrder === "big" ? digits : digits.reverse()).reduce((sum, byte) => sum * 256 + byte, 0);
}

const overhead = (protocol: PacketProtocol) => protocol.start.length + protocol.lengthBytes + checkBits(protocol.checksum) / 8;

/** The payload of an unstuffed packet; null where start, length or check is wrong. */
function payloadOf(protocol: PacketProtocol, packet: readonly number[]): Uint8Array | null {
  const { start, lengthBytes } = protocol;
  if (!start.every((byte, index) => packet[index] === byte) || packet.length < overhead(protocol)) return null;
  const length = lengthAt(protocol, packet);
  if (packet.length !== length + overhead(protocol)) return null;
  const checked = packet.slice(start.length, start.length + lengthBytes + length);
  const check = orderedBytes(protocol, checkOf(protocol.checksum, Uint8Array.from(checked)), checkBits(protocol.checksum) / 8);
  return check.every((byte, index) => packet[packet.length - check.length + index] === byte) ? Uint8Array.from(checked.slice(lengthBytes)) : null;
}

/** The payload of a whole packet as it stood on the line; null where it is none. */
export function openPacket(protocol: PacketProtocol, bytes: Uint8Array): Uint8Array | null {
  if (!protocol.stuffing) return payloadOf(protocol, [...bytes]);
  const between = [...bytes].filter((byte) => byte !== END);
  const plain = unstuff(between);
  return plain && payloadOf(protocol, plain);
}

type Cut = { readonly bytes: Uint8Array; readonly why: "whole" | "check" | "too-long" };

/** Cuts at END bytes. Where two packets share one END, or it was lost, the next one brings order. */
function createStuffedCutter(): { push(byte: number): Cut | null; take(): Uint8Array; readonly length: number } {
  let held: number[] = [];
  const most = 2 * MAX_PAYLOAD;
  const take = () => {
    const bytes = Uint8Array.from(held);
    held = [];
    return bytes;
  };
  return {
    push(byte) {
      held.push(byte);
      // An END that follows nothing begins a packet; any other ends one.
      if (byte === END && held.some((one) => one !== END)) return { bytes: take(), why: "whole" };
      if (byte === END) held = [END];
      return held.length > most ? { bytes: take(), why: "too-long" } : null;
    },
    take,
    get length() {
      return held.length;
    },
  };
}

/** Hunts for the start bytes, then counts. A packet whose check is wrong is given up as a whole. */
function createCountingCutter(protocol: PacketProtocol): ReturnType<typeof createStuffedCutter> {
  let held: number[] = [];
  const take = () => {
    const bytes = Uint8Array.from(held);
    held = [];
    return bytes;
  };
  return {
    push(byte) {
      held.push(byte);
      const at = held.length - 1;
      if (at < protocol.start.length && byte !== protocol.start[at]) return { bytes: take(), why: "check" };
      if (held.length < protocol.start.length + protocol.lengthBytes) return null;
      const length = lengthAt(protocol, held);
      if (length > MAX_PAYLOAD) return { bytes: take(), why: "too-long" };
      return held.length === length + overhead(protocol) ? { bytes: take(), why: "whole" } : null;
    },
    take,
    get length() {
      return held.length;
    },
  };
}

/** Decodes a byte stream into packets, either side's. Bound: one packet. */
export function createPacketDecoder(protocol: PacketProtocol): FrameDecoder {
  const cutter = protocol.stuffing ? createStuffedCutter() : createCountingCutter(protocol);

  function frameOf({ bytes, why }: Cut): Frame {
    if (why !== "whole") return { kind: "noise", bytes, why };
    return openPacket(protocol, bytes) ? { kind: "frame", bytes, text: hexOf(bytes) } : { kind: "noise", bytes, why: "check" };
  }

  return {
    push: (bytes) => [...bytes].flatMap((byte) => {
      const cut = cutter.push(byte);
      return cut ? [frameOf(cut)] : [];
    }),
    flush: () => (cutter.length === 0 ? [] : [{ kind: "noise", bytes: cutter.take(), why: "cut-short" }]),
    get heldBytes() {
      return cutter.length;
    },
  };
}
