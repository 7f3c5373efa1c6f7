import { describe, expect, it } from "vitest";
import { checkBits, checkOf } from "@/lib/serial/protocols/checksum";

const nine = new TextEncoder().encode("123456789");

describe("checks over bytes", () => {
  // Source: check values of the CRC RevEng catalogue of parametrised CRC algorithms.
  it.each([
    ["crc8-smbus", 0xf4],
    ["crc16-xmodem", 0x31c3],
    ["crc16-ibm-3740", 0x29b1],
    ["crc16-modbus", 0x4b37],
  ] as const)("%s gives the catalogue's check value", (algorithm, check) => {
    expect(checkOf(algorithm, nine)).toBe(check);
  });

  // By hand: 0x31 + … + 0x39 = 0x1DD; the exclusive or of the nine is 0x31.
  it("sums and exclusive-ors eight bits", () => {
    expect(checkOf("sum8", nine)).toBe(0xdd);
    expect(checkOf("xor8", nine)).toBe(0x31);
  });

  it("says how wide each is", () => {
    expect([checkBits("sum8"), checkBits("crc8-smbus"), checkBits("crc16-modbus")]).toEqual([8, 8, 16]);
  });
});
