import type { CheckAlgorithm } from "@/lib/serial/driver/definition";

type CrcParameters = { readonly width: 8 | 16; readonly poly: number; readonly init: number; readonly reflected: boolean };

/**
 * Parameters by their names in the catalogue of parametrised CRC algorithms (CRC RevEng); xorout is 0 in all of these.
 * Check values for "123456789": SMBUS F4, XMODEM 31C3, IBM-3740 29B1, MODBUS 4B37.
 */
const CRCS: Readonly<Record<Exclude<CheckAlgorithm, "sum8" | "xor8">, CrcParameters>> = {
  "crc8-smbus": { width: 8, poly: 0x07, init: 0x00, reflected: false },
  "crc16-xmodem": { width: 16, poly: 0x1021, init: 0x0000, reflected: false },
  "crc16-ibm-3740": { width: 16, poly: 0x1021, init: 0xffff, reflected: false },
  "crc16-modbus": { width: 16, poly: 0x8005, init: 0xffff, reflected: true },
};

function reflect(value: number, width: number): number {
  let reflected = 0;
  for (let bit = 0; bit < width; bit += 1) if (value & (1 << bit)) reflected |= 1 << (width - 1 - bit);
  return reflected;
}

function crc(bytes: Uint8Array, { width, poly, init, reflected }: CrcParameters): number {
  const top = 1 << (width - 1);
  const mask = (1 << width) - 1;
  let sum = init;
  for (const byte of bytes) {
    sum ^= (reflected ? reflect(byte, 8) : byte) << (width - 8);
    for (let bit = 0; bit < 8; bit += 1) sum = (sum & top ? (sum << 1) ^ poly : sum << 1) & mask;
  }
  return reflected ? reflect(sum, width) : sum;
}

/** Check of a stretch of bytes, as an unsigned number of `checkBits` bits. */
export function checkOf(algorithm: CheckAlgorithm, bytes: Uint8Array): number {
  if (algorithm === "sum8") return bytes.reduce((sum, byte) => (sum + byte) & 0xff, 0);
  if (algorithm === "xor8") return bytes.reduce((sum, byte) => sum ^ byte, 0);
  return crc(bytes, CRCS[algorithm]);
}

/** Bits of a check: 8 or 16. Two faults can cancel out in 8. */
export function checkBits(algorithm: CheckAlgorithm): 8 | 16 {
  return algorithm === "sum8" || algorithm === "xor8" ? 8 : CRCS[algorithm].width;
}
