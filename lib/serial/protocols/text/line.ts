import type { Frame, FrameDecoder } from "@/lib/serial/driver/compiled";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import { checkBits, checkOf } from "@/lib/serial/protocols/checksum";

export type TextProtocol = Extract<DriverDefinition["protocol"], { kind: "text" }>;

const encoder = new TextEncoder();
const decoder = new TextDecoder("utf-8", { fatal: true, ignoreBOM: true });

/** The check field of a line, with its asterisk: `*713F`; empty where the protocol has none. Form: IEC 61162-1. */
export function checkField(protocol: TextProtocol, body: string): string {
  if (!protocol.check) return "";
  const { algorithm } = protocol.check;
  const digits = checkOf(algorithm, encoder.encode(body)).toString(16).toUpperCase();
  return `*${digits.padStart(checkBits(algorithm) / 4, "0")}`;
}

/** Bytes of a line: body, check field where asked for, line end. */
export function encodeLine(protocol: TextProtocol, body: string, checked = true): Uint8Array {
  return encoder.encode(body + (checked ? checkField(protocol, body) : "") + protocol.lineEnd);
}

/**
 * Splits a line from its check field.
 * @returns the body, and whether the check was right, wrong, or not there
 */
export function openLine(protocol: TextProtocol, line: string): { readonly body: string; readonly check: "none" | "right" | "wrong" } {
  if (!protocol.check) return { body: line, check: "none" };
  const star = line.length - checkBits(protocol.check.algorithm) / 4 - 1;
  if (star < 0 || line[star] !== "*" || !/^[0-9A-F]+$/u.test(line.slice(star + 1))) return { body: line, check: "none" };
  const body = line.slice(0, star);
  return { body, check: checkField(protocol, body) === line.slice(star) ? "right" : "wrong" };
}

export type LinePiece = { readonly bytes: Uint8Array; readonly whole: boolean };

/** Cuts bytes into lines, line ends included. */
export interface LineSplitter {
  /** `whole` is false for the pieces of a line that passed the bound. */
  push(bytes: Uint8Array): LinePiece[];
  flush(): Uint8Array | null;
  readonly heldBytes: number;
}

/** Bound: one line of `maxLineBytes` and its end. A longer line is handed on in pieces of that size, none of them whole. */
export function createLineSplitter({ lineEnd, maxLineBytes }: Pick<TextProtocol, "lineEnd" | "maxLineBytes">): LineSplitter {
  const end = encoder.encode(lineEnd);
  const held = new Uint8Array(maxLineBytes + end.length);
  let length = 0;
  let overlong = false;

  const take = () => {
    const taken = held.slice(0, length);
    length = 0;
    return taken;
  };
  const last = end[end.length - 1];
  const atEnd = (byte: number) => byte === last && length >= end.length && end.every((one, index) => held[length - end.length + index] === one);

  return {
    push(bytes) {
      const pieces: LinePiece[] = [];
      for (const byte of bytes) {
        held[length] = byte;
        length += 1;
        if (atEnd(byte)) {
          pieces.push({ bytes: take(), whole: !overlong });
          overlong = false;
        } else if (length === held.length) {
          overlong = true;
          pieces.push({ bytes: take(), whole: false });
        }
      }
      return pieces;
    },
    flush() {
      overlong = false;
      return length === 0 ? null : take();
    },
    get heldBytes() {
      return length;
    },
  };
}

/** Reads the text of a line's bytes (line end included). Null: not UTF-8. */
export function readLine(protocol: TextProtocol, bytes: Uint8Array): string | null {
  try {
    return decoder.decode(bytes.subarray(0, bytes.length - protocol.lineEnd.length));
  } catch {
    return null;
  }
}

/** Decodes a byte stream of the text protocol into frames; the text of a frame has neither check nor line end. */
export function createLineDecoder(protocol: TextProtocol): FrameDecoder {
  const splitter = createLineSplitter(protocol);

  function frameOf({ bytes, whole }: LinePiece): Frame {
    if (!whole) return { kind: "noise", bytes, why: "too-long" };
    const line = readLine(protocol, bytes);
    if (line === null) return { kind: "noise", bytes, why: "not-text" };
    const { body, check } = openLine(protocol, line);
    if (check === "wrong") return { kind: "noise", bytes, why: "check" };
    if (check === "none" && protocol.check?.requiredInReplies) return { kind: "noise", bytes, why: "no-check" };
    return { kind: "frame", bytes, text: body };
  }

  return {
    push: (bytes) => splitter.push(bytes).map(frameOf),
    flush: () => {
      const rest = splitter.flush();
      return rest ? [{ kind: "noise", bytes: rest, why: "cut-short" }] : [];
    },
    get heldBytes() {
      return splitter.heldBytes;
    },
  };
}
