import type { Frame, FrameDecoder } from "@/lib/serial/driver/compiled";
import { checkOf } from "@/lib/serial/protocols/checksum";
import { hexOf } from "@/lib/serial/wire-log";

/** Functions that this codec speaks. Source: MODBUS Application Protocol V1.1b3, chapter 6. */
export const READ_HOLDING = 0x03;
export const READ_INPUT = 0x04;
export const WRITE_SINGLE = 0x06;
export const WRITE_MULTIPLE = 0x10;
/** Set in the function code of an exception. */
export const EXCEPTION_BIT = 0x80;
export const MAX_READ_REGISTERS = 125;
export const MAX_WRITE_REGISTERS = 123;
/** An RTU frame: address, PDU of 253 bytes at most, CRC. */
const MAX_FRAME_BYTES = 256;

/** Source: MODBUS Application Protocol V1.1b3, chapter 7. */
export const EXCEPTIONS: Readonly<Record<number, string>> = {
  0x01: "illegal function", 0x02: "illegal data address", 0x03: "illegal data value", 0x04: "slave device failure",
  0x05: "acknowledge", 0x06: "slave device busy", 0x08: "memory parity error", 0x0a: "gateway path unavailable", 0x0b: "gateway target device failed to respond",
};

/** Silence that ends a frame, in ms. Source: MODBUS over Serial Line V1.02: 3.5 characters of 11 bits, 1.75 ms above 19 200 baud. */
export function frameSilenceMs(baudRate: number): number {
  return baudRate > 19_200 ? 1.75 : (3.5 * 11 * 1000) / baudRate;
}

/** A frame with its CRC, low byte first. */
export function sealFrame(body: readonly number[]): Uint8Array {
  const bytes = Uint8Array.from(body);
  const check = checkOf("crc16-modbus", bytes);
  return Uint8Array.from([...body, check & 0xff, check >> 8]);
}

export function isSealed(frame: Uint8Array): boolean {
  const check = checkOf("crc16-modbus", frame.subarray(0, -2));
  return frame.length >= 4 && frame[frame.length - 2] === (check & 0xff) && frame[frame.length - 1] === check >> 8;
}

/** Length of a reply by its first bytes: undefined while they don't tell, 0 where no reply begins so. */
function replyLength(head: readonly number[]): number | undefined {
  const code = head[1];
  if (code === undefined) return undefined;
  if ((code & EXCEPTION_BIT) !== 0) return 5;
  if (code === WRITE_SINGLE || code === WRITE_MULTIPLE) return 8;
  if (code !== READ_HOLDING && code !== READ_INPUT) return 0;
  const count = head[2];
  return count === undefined ? undefined : count % 2 === 0 && count <= 250 ? 5 + count : 0;
}

/**
 * Cuts a byte stream into reply frames by the length that their heads tell.
 *
 * After a frame that is none, where the next one begins is not known: everything is noise until the line was cleared (`flush`).
 */
export function createReplyDecoder(): FrameDecoder {
  let held: number[] = [];
  let lost = false;

  function noise(why: "check" | "cut-short"): Frame[] {
    const bytes = Uint8Array.from(held);
    held = [];
    return bytes.length === 0 ? [] : [{ kind: "noise", bytes, why }];
  }

  function take(): Frame[] {
    const length = replyLength(held);
    if (length === 0) {
      lost = true;
      return noise("check");
    }
    if (length === undefined || held.length < length) return [];
    const bytes = Uint8Array.from(held);
    if (!isSealed(bytes)) {
      lost = true;
      return noise("check");
    }
    held = [];
    return [{ kind: "frame", bytes, text: hexOf(bytes) }];
  }

  return {
    push(bytes) {
      const frames: Frame[] = [];
      for (const byte of bytes) {
        held.push(byte);
        if (!lost) frames.push(...take());
        else if (held.length === MAX_FRAME_BYTES) frames.push(...noise("check"));
      }
      if (lost) frames.push(...noise("check"));
      return frames;
    },
    flush() {
      lost = false;
      return noise("cut-short");
    },
    get heldBytes() {
      return held.length;
    },
  };
}
