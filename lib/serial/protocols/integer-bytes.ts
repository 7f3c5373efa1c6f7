import type { NativeValue } from "@/lib/serial/native";

/**
 * Bytes of a value, most significant first. Texts are filled up with zeros.
 * @param count bytes; integers take six at most, which a double holds exactly
 */
export function toBytes(value: NativeValue, count: number, encoding: "integer" | "ascii"): Uint8Array {
  const bytes = new Uint8Array(count);
  if (encoding === "ascii") {
    bytes.set(new TextEncoder().encode(String(value)).subarray(0, count));
    return bytes;
  }
  // Two's complement by arithmetic: bit operations end at 32 bits.
  let rest = Number(value) < 0 ? Number(value) + 2 ** (8 * count) : Number(value);
  for (let at = count - 1; at >= 0; at -= 1) {
    bytes[at] = rest % 256;
    rest = Math.floor(rest / 256);
  }
  return bytes;
}

/** The value of bytes, most significant first. A text ends at its first zero. */
export function fromBytes(bytes: Uint8Array, encoding: "integer" | "ascii", signed: boolean): NativeValue {
  if (encoding === "ascii") {
    const end = bytes.indexOf(0);
    return String.fromCharCode(...(end === -1 ? bytes : bytes.subarray(0, end)));
  }
  const value = bytes.reduce((sum, byte) => sum * 256 + byte, 0);
  return signed && (bytes[0] ?? 0) >= 128 ? value - 2 ** (8 * bytes.length) : value;
}

/** Letters and digits crossed out, zeros kept: a name of the same length that says nothing. */
export function crossOutBytes(bytes: Uint8Array): Uint8Array {
  return bytes.map((byte) => ((byte >= 32 && byte < 127) || byte > 127 ? 0x78 : byte));
}
