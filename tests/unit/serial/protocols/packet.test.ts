import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { compileDriver } from "@/lib/serial/driver/compile";
import { driverDefinitionSchema } from "@/lib/serial/driver/definition";
import { ternwick16 } from "@/lib/serial/drivers/ternwick-16";
import { checkOf } from "@/lib/serial/protocols/checksum";
import { createPacketDecoder, openPacket, sealPacket, type PacketProtocol } from "@/lib/serial/protocols/packet/packets";
import { compiled } from "@/tests/unit/serial/simulated-rig";

const driver = compiled(ternwick16);
const stuffed = ternwick16.protocol as PacketProtocol;
const variants: readonly PacketProtocol[] = [
  stuffed,
  { ...stuffed, stuffing: false },
  { ...stuffed, stuffing: false, byteOrder: "big", lengthBytes: 2, checksum: "crc8-smbus", start: [0xaa] },
  { ...stuffed, byteOrder: "big", lengthBytes: 2, checksum: "xor8", start: [0xc0, 0xdb] },
];
const anyPayload = fc.uint8Array({ minLength: 3, maxLength: 60 });

describe("packets", () => {
  // By hand after RFC 1055: END C0, ESC DB; C0 inside is DB DC, DB inside is DB DD.
  it("are stuffed as RFC 1055 says", () => {
    const packet = [...sealPacket(stuffed, [0xc0, 0xdb, 0x01])];
    expect(packet[0]).toBe(0xc0);
    expect(packet.at(-1)).toBe(0xc0);
    expect(packet.slice(1, 9)).toEqual([0x54, 0x57, 3, 0xdb, 0xdc, 0xdb, 0xdd, 0x01]);
    expect(packet.slice(1, -1)).not.toContain(0xc0);
    const check = checkOf("crc16-ibm-3740", Uint8Array.of(3, 0xc0, 0xdb, 0x01));
    expect(openPacket(stuffed, Uint8Array.from(packet))).toEqual(Uint8Array.of(0xc0, 0xdb, 0x01));
    expect(packet.slice(9, -1)).toEqual([check & 0xff, check >> 8].flatMap((byte) => (byte === 0xc0 ? [0xdb, 0xdc] : byte === 0xdb ? [0xdb, 0xdd] : [byte])));
  });

  it("come back as they were sealed, however the bytes are cut", () => {
    fc.assert(
      fc.property(fc.constantFrom(...variants), fc.array(anyPayload, { minLength: 1, maxLength: 4 }), (protocol, payloads) => {
        const stream = Uint8Array.from(payloads.flatMap((payload) => [...sealPacket(protocol, [...payload])]));
        const decoder = createPacketDecoder(protocol);
        const frames = [...stream].flatMap((byte) => decoder.push(Uint8Array.of(byte)));
        expect(frames).toEqual(createPacketDecoder(protocol).push(stream));
        expect(frames.map((frame) => openPacket(protocol, frame.bytes))).toEqual(payloads);
      }),
    );
  });

  it("with one byte changed, lost or doubled give no payload that was not sent", () => {
    const payload = [0x81, 16, 3, 0xc0, 0xdb, 7, 8, 9];
    const next = [0x81, 1, 0, 5];
    for (const protocol of variants.slice(0, 2)) {
      const packet = [...sealPacket(protocol, payload)];
      const tries: number[][] = packet.flatMap((byte, at) => [
        ...Array.from({ length: 255 }, (_, index) => [...packet.slice(0, at), byte ^ (index + 1), ...packet.slice(at + 1)]),
        [...packet.slice(0, at), ...packet.slice(at + 1)], [...packet.slice(0, at), byte, byte, ...packet.slice(at + 1)],
      ]);
      for (const bad of tries) {
        const decoder = createPacketDecoder(protocol);
        for (const frame of decoder.push(Uint8Array.from(bad))) {
          if (frame.kind === "frame") expect([...(openPacket(protocol, frame.bytes) ?? [])]).toEqual(payload);
        }
        decoder.flush();
        expect(decoder.push(sealPacket(protocol, next))).toMatchObject([{ kind: "frame" }]);
      }
    }
  });

  it("hold no more than one packet, whatever arrives", () => {
    fc.assert(
      fc.property(fc.constantFrom(...variants), fc.uint8Array({ maxLength: 6000 }), (protocol, noise) => {
        const decoder = createPacketDecoder(protocol);
        decoder.push(noise);
        expect(decoder.heldBytes).toBeLessThanOrEqual(2300);
      }),
    );
  });
});

describe("the packet codec", () => {
  const slot = (number: number) => driver.settings.filter((setting) => setting.scope === "slot" && setting.number === number);

  it("reads each block once, and none for what cannot be read", () => {
    const requests = driver.codec.planReads(driver.settings.filter((setting) => setting.readable).map((setting) => setting.key));
    expect(requests).toHaveLength(1 + 16 + 24);
    expect(requests.flatMap((request) => request.keys)).toHaveLength(driver.settings.length - 2);
  });

  it("writes a block whole or not at all", () => {
    const writes = slot(3).map(({ key, initial }) => ({ key, value: initial }));
    expect(driver.codec.planWrite(writes)).toMatchObject({ ok: true });
    expect(driver.codec.planWrite(writes.slice(1))).toMatchObject({ ok: false });
    expect(driver.codec.planWrite([...writes, ...slot(4).map(({ key, initial }) => ({ key, value: initial }))])).toMatchObject({ ok: false });
    expect(driver.codec.planWrite([{ key: "everywhere.powerOnSlot", value: 2 }])).toMatchObject({ ok: true });
  });

  it("tells answers of other blocks, refusals and lengths apart", () => {
    const [read] = driver.codec.planReads(["slots[3].name"]);
    const frame = (payload: number[]) => createPacketDecoder(stuffed).push(sealPacket(stuffed, payload))[0];
    const match = (payload: number[]) => {
      const one = frame(payload);
      return one && read?.match(one);
    };
    expect(match([0x81, 16, 4, ...Array<number>(30).fill(0)])).toEqual({ kind: "other" });
    expect(match([0x82, 16, 3])).toEqual({ kind: "other" });
    expect(match([0xff, 1, 16, 3, 2])).toEqual({ kind: "refused", message: "unknown block" });
    expect(match([0xff, 1, 16, 3, 6])).toEqual({ kind: "busy" });
    expect(match([0x81, 16, 3, 1])).toMatchObject({ kind: "malformed" });
    expect(match([0x81, 16, 3, 65, ...Array<number>(29).fill(0)])).toMatchObject({ kind: "reply", values: { "slots[3].name": "A" } });
  });

  it("tells by path what cannot work", () => {
    const changed = (change: (copy: typeof ternwick16) => unknown) => {
      const copy = structuredClone(ternwick16);
      change(copy);
      const result = compileDriver(driverDefinitionSchema.parse(copy));
      return result.ok ? [] : result.error.map(({ path, message }) => `${path}: ${message}`);
    };
    const field = (copy: typeof ternwick16, index: number) => {
      const wire = copy.settings[index]?.wire;
      if (wire?.kind !== "packet") throw new Error("not packet");
      return wire.field;
    };
    expect(changed((copy) => Object.assign(field(copy, 0), { block: "none" }))[0]).toMatch(/^settings\[0\]\.wire\.field\.block: is no block/u);
    expect(changed((copy) => Object.assign(field(copy, 0), { block: "slot" }))[0]).toMatch(/stands once/u);
    expect(changed((copy) => Object.assign(field(copy, 1), { byteOffset: 1 }))[0]).toMatch(/shares a byte/u);
    expect(changed((copy) => Object.assign(field(copy, 3), { byteOffset: 7 }))[0]).toMatch(/past the end/u);
    expect(changed((copy) => Object.assign(field(copy, 0), { signed: false }))[0]).toMatch(/holds values/u);
  });
});
