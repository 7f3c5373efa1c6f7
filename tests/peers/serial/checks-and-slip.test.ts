import crc16ccitt from "crc/crc16ccitt";
import crc16modbus from "crc/crc16modbus";
import crc16xmodem from "crc/crc16xmodem";
import crc8 from "crc/crc8";
import fc from "fast-check";
import { SlipDecoder, SlipEncoder } from "serialport";
import { describe, expect, test } from "vitest";
import { ternwick16 } from "@/lib/serial/drivers/ternwick-16";
import { checkOf } from "@/lib/serial/protocols/checksum";
import { createPacketDecoder, openPacket, sealPacket, type PacketProtocol } from "@/lib/serial/protocols/packet/packets";

const nine = Buffer.from("123456789");

describe("checks, beside the npm package crc", () => {
  // Names and check values: the catalogue of parametrised CRC algorithms (CRC RevEng). IBM-3740 is what many call CCITT-FALSE.
  test.each([
    ["crc8-smbus", crc8, 0xf4],
    ["crc16-xmodem", crc16xmodem, 0x31c3],
    ["crc16-ibm-3740", crc16ccitt, 0x29b1],
    ["crc16-modbus", crc16modbus, 0x4b37],
  ] as const)("%s gives the catalogue's check value, and what the package gives for any bytes", (name, peer, check) => {
    expect(peer(nine)).toBe(check);
    expect(checkOf(name, nine)).toBe(check);
    fc.assert(fc.property(fc.uint8Array({ maxLength: 300 }), (bytes) => {
      expect(checkOf(name, bytes)).toBe(peer(Buffer.from(bytes)));
    }));
  });
});

const stuffed = ternwick16.protocol as PacketProtocol;
const END = 0o300;
const ESC = 0o333;
/** Bytes that stuffing is about stand more often than by chance. */
const payload = fc.array(fc.oneof(fc.constantFrom(0o300, 0o333, 0o334, 0o335), fc.integer({ min: 0, max: 255 })), { minLength: 1, maxLength: 60 });

/** A packet without its stuffing, put together here: start, length, payload, check in the protocol's order. */
function plainPacket(bytes: readonly number[]): number[] {
  const check = crc16ccitt(Buffer.from([bytes.length, ...bytes]));
  return [0x54, 0x57, bytes.length, ...bytes, check & 0xff, check >> 8];
}

/** The receiver of RFC 1055, "SLIP DRIVERS", in its own words: packets between END bytes, empty ones ignored. */
function receivePackets(line: Iterable<number>): number[][] {
  const packets: number[][] = [];
  let packet: number[] = [];
  let escaped = false;
  for (const byte of line) {
    if (escaped) {
      packet.push(byte === 0o334 ? END : byte === 0o335 ? ESC : byte);
      escaped = false;
    } else if (byte === ESC) escaped = true;
    else if (byte !== END) packet.push(byte);
    else if (packet.length > 0) {
      packets.push(packet);
      packet = [];
    }
  }
  return packets;
}

function through(stream: SlipEncoder | SlipDecoder, bytes: readonly number[]): Promise<number[][]> {
  return new Promise((resolve, reject) => {
    const chunks: number[][] = [];
    stream.on("data", (chunk: Buffer) => chunks.push([...chunk]));
    stream.on("end", () => resolve(chunks));
    stream.on("error", reject);
    stream.end(Buffer.from(bytes));
  });
}

describe("byte stuffing, by the rules of RFC 1055", () => {
  test("END inside a packet goes as ESC 334, ESC as ESC 335, both in octal, and END stands at both ends", () => {
    const sealed = [...sealPacket(stuffed, [END, ESC, 0o334, 0o335])];
    expect(sealed.slice(0, 10)).toEqual([END, 0x54, 0x57, 4, ESC, 0o334, ESC, 0o335, 0o334, 0o335]);
    expect(sealed.at(-1)).toBe(END);
  });

  test("what we send is the packet that the RFC's receiver takes from the line", () => {
    fc.assert(fc.property(fc.array(payload, { minLength: 1, maxLength: 4 }), (payloads) => {
      const line = payloads.flatMap((bytes) => [...sealPacket(stuffed, bytes)]);
      expect(receivePackets(line)).toEqual(payloads.map(plainPacket));
    }));
  });

  test("the decoder of the package serialport takes our packets, and its encoder's packets are taken by us", async () => {
    await fc.assert(fc.asyncProperty(payload, async (bytes) => {
      const heard = await through(new SlipDecoder(), [...sealPacket(stuffed, bytes)]);
      expect(heard.filter((one) => one.length > 0)).toEqual([plainPacket(bytes)]);
      const line = (await through(new SlipEncoder(), plainPacket(bytes))).flat();
      const decoder = createPacketDecoder(stuffed);
      const frames = decoder.push(Uint8Array.from([END, ...line]));
      expect(frames.map((frame) => [...(openPacket(stuffed, frame.bytes) ?? [])])).toEqual([bytes]);
    }));
  });
});
