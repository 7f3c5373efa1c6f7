import { readFileSync } from "node:fs";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { compileDriver } from "@/lib/serial/driver/compile";
import { driverDefinitionSchema, modbusFieldSchema } from "@/lib/serial/driver/definition";
import { brackenrow4r } from "@/lib/serial/drivers/brackenrow-4r";
import { checkOf } from "@/lib/serial/protocols/checksum";
import { createReplyDecoder, EXCEPTIONS, frameSilenceMs, MAX_READ_REGISTERS, sealFrame } from "@/lib/serial/protocols/modbus/frames";
import { bestSpans, decodeField, encodeField, endOf, placeField, type PlacedField } from "@/lib/serial/protocols/modbus/registers";
import { compiled } from "@/tests/unit/serial/simulated-rig";

type Vectors = {
  crc16: { check: string; input: string };
  fc03_example: { request: string; response: string };
  exceptions: Record<string, string>;
  t35: { values_ms: Record<string, number> };
};
// Source: tests/fixtures/standards/modbus.json, with the document of each figure in it.
const vectors = JSON.parse(readFileSync("tests/fixtures/standards/modbus.json", "utf8")) as Vectors;
const bytesOf = (hex: string) => Uint8Array.from(hex.split(" "), (pair) => Number.parseInt(pair, 16));
const driver = compiled(brackenrow4r);

describe("Modbus RTU", () => {
  it("has the published CRC, example frames, exceptions and silences", () => {
    expect(checkOf("crc16-modbus", new TextEncoder().encode(vectors.crc16.input)).toString(16)).toBe(vectors.crc16.check);
    for (const frame of [vectors.fc03_example.request, vectors.fc03_example.response].map(bytesOf)) expect(sealFrame([...frame.subarray(0, -2)])).toEqual(frame);
    expect(createReplyDecoder().push(bytesOf(vectors.fc03_example.response))).toMatchObject([{ kind: "frame" }]);
    for (const [code, name] of Object.entries(vectors.exceptions)) expect(EXCEPTIONS[Number.parseInt(code, 16)]).toBe(name);
    for (const [baud, ms] of Object.entries(vectors.t35.values_ms)) expect(frameSilenceMs(Number(baud))).toBeCloseTo(ms, 9);
  });

  it("reads back every value of a field as it was written, in either order of words", () => {
    const orders = fc.constantFrom("high-first" as const, "low-first" as const);
    fc.assert(
      fc.property(fc.integer({ min: -(2 ** 31), max: 2 ** 31 - 1 }), orders, (value, wordOrder) => {
        const field = modbusFieldSchema.parse({ register: 7, words: 2, signed: true, wordOrder });
        expect(decodeField(placeField(field, 0), encodeField(field, value), 7)).toBe(value);
      }),
    );
    // By hand: 27 000 000 is 0x019BFCC0.
    expect([...encodeField(modbusFieldSchema.parse({ register: 0, words: 2, wordOrder: "low-first" }), 27_000_000)]).toEqual([0xfc, 0xc0, 0x01, 0x9b]);
  });

  it("gives the same frames however the bytes are cut, and holds one frame at most", () => {
    const stream = Uint8Array.from([...bytesOf(vectors.fc03_example.response), ...sealFrame([1, 0x83, 2]), ...bytesOf(vectors.fc03_example.response)]);
    const whole = createReplyDecoder().push(stream);
    const decoder = createReplyDecoder();
    expect([...stream].flatMap((byte) => decoder.push(Uint8Array.of(byte)))).toEqual(whole);
    expect(whole.map((frame) => frame.kind)).toEqual(["frame", "frame", "frame"]);
    fc.assert(fc.property(fc.uint8Array({ maxLength: 3000 }), (noise) => {
      const any = createReplyDecoder();
      any.push(noise);
      expect(any.heldBytes).toBeLessThanOrEqual(256);
    }));
  });

  it("takes no reply in which one byte was changed, and is in step again once the line was cleared", () => {
    const good = bytesOf(vectors.fc03_example.response);
    for (let at = 0; at < good.length; at += 1) {
      for (let mask = 1; mask < 256; mask += 1) {
        const decoder = createReplyDecoder();
        const bad = good.map((byte, index) => (index === at ? byte ^ mask : byte));
        expect(decoder.push(bad).filter((frame) => frame.kind === "frame")).toEqual([]);
        decoder.flush();
        expect(decoder.push(good)).toMatchObject([{ kind: "frame" }]);
      }
    }
  });

  it("tells an exception, a busy device and another unit apart", () => {
    const [read] = driver.codec.planReads(["slots[1].placement.offsetPx"]);
    const frame = (...body: number[]) => driver.codec.createDecoder().push(sealFrame(body))[0] ?? { kind: "noise" as const, bytes: new Uint8Array(0), why: "check" as const };
    expect(read?.match(frame(17, 0x83, 2))).toEqual({ kind: "refused", message: "illegal data address" });
    expect(read?.match(frame(17, 0x83, 6))).toEqual({ kind: "busy" });
    expect(read?.match(frame(18, 3, 2, 0, 5))).toEqual({ kind: "other" });
    // The exception of another function answers another request.
    expect(read?.match(frame(17, 0x90, 2))).toEqual({ kind: "other" });
    expect(read?.match(frame(17, 3, 4, 0, 5, 0, 5))).toEqual({ kind: "other" });
    expect(read?.match(frame(17, 3, 2, 0xff, 0xfe))).toMatchObject({ kind: "reply", values: { "slots[1].placement.offsetPx": -2 } });
  });

  it("writes neighbours in one request and nothing else", () => {
    const both = driver.codec.planWrite([{ key: "slots[1].placement.offsetLines", value: -1 }, { key: "slots[1].placement.offsetPx", value: 4 }]);
    // By hand: unit 17, function 16, register 110, 2 registers, 4 bytes, 4 and −1.
    expect(both.ok && [...both.value.bytes.subarray(0, -2)]).toEqual([17, 16, 0, 110, 0, 2, 4, 0, 4, 0xff, 0xff]);
    expect(driver.codec.planWrite([{ key: "slots[1].placement.offsetPx", value: 4 }, { key: "slots[1].placement.widthPct", value: 90 }]).ok).toBe(false);
    expect(driver.codec.planWrite([{ key: "slots[9].name", value: "X" }]).ok).toBe(false);
  });
});

describe("the spans of a whole read", () => {
  const spanCost = (fields: readonly PlacedField[], groups: readonly number[][], overhead: number, maxGap: number, most: number) => {
    let cost = 0;
    for (const group of groups) {
      const sorted = group.flatMap((index) => fields[index] ?? []).sort((a, b) => a.first - b.first);
      const count = Math.max(...sorted.map(endOf)) - (sorted[0]?.first ?? 0);
      const gap = sorted.slice(1).some((one, index) => one.first - endOf(sorted[index] ?? one) > maxGap);
      if (count > most || gap) return Infinity;
      cost += overhead + count;
    }
    return cost;
  };

  it("take the least time of all ways to cut", () => {
    const field = (register: number, words: number) => placeField(modbusFieldSchema.parse({ register, words }), 0);
    const gaps = fc.array(fc.record({ gap: fc.integer({ min: 0, max: 12 }), words: fc.integer({ min: 1, max: 3 }) }), { minLength: 1, maxLength: 8 });
    fc.assert(
      fc.property(gaps, fc.integer({ min: 1, max: 10 }), fc.integer({ min: 0, max: 12 }), fc.integer({ min: 4, max: 20 }), (places, overheadRegisters, maxGap, most) => {
        let at = 0;
        const fields = places.map(({ gap, words }) => {
          const placed = field(at + gap, words);
          at = endOf(placed);
          return placed;
        });
        const spans = bestSpans(fields, { overheadRegisters, maxGap, most });
        const found = spanCost(fields, spans.map((span) => [...span.members]), overheadRegisters, maxGap, most);
        let least = Infinity;
        for (let cuts = 0; cuts < 2 ** (fields.length - 1); cuts += 1) {
          const groups: number[][] = [[0]];
          for (let index = 1; index < fields.length; index += 1) {
            if (cuts & (1 << (index - 1))) groups.push([index]);
            else groups.at(-1)?.push(index);
          }
          least = Math.min(least, spanCost(fields, groups, overheadRegisters, maxGap, most));
        }
        expect(found).toBe(least);
        expect(spans.flatMap((span) => span.members).sort((a, b) => a - b)).toEqual(fields.map((_, index) => index));
      }),
      { numRuns: 300 },
    );
  });

  it("never pass 125 registers, and read every setting once", () => {
    const requests = driver.codec.planReads(driver.settings.map((setting) => setting.key));
    expect(requests.flatMap((request) => request.keys).sort()).toEqual(driver.settings.map((setting) => setting.key).sort());
    for (const request of requests) expect((request.replyBytes - 5) / 2).toBeLessThanOrEqual(MAX_READ_REGISTERS);
  });
});

describe("a Modbus driver that cannot work", () => {
  it("is told by path", () => {
    const changed = (change: (copy: typeof brackenrow4r) => unknown) => {
      const copy = structuredClone(brackenrow4r);
      change(copy);
      const result = compileDriver(driverDefinitionSchema.parse(copy));
      return result.ok ? [] : result.error.map(({ path, message }) => `${path}: ${message}`);
    };
    const field = (copy: typeof brackenrow4r, index: number) => {
      const wire = copy.settings[index]?.wire;
      if (wire?.kind !== "modbus") throw new Error("not modbus");
      return wire.field;
    };
    expect(changed((copy) => Object.assign(field(copy, 1), { register: 0 }))[0]).toMatch(/shares register 0/u);
    expect(changed((copy) => Object.assign(field(copy, 9), { stride: 0 }))[0]).toMatch(/stride: is shorter/u);
    expect(changed((copy) => Object.assign(field(copy, 5), { signed: false }))[0]).toMatch(/holds values/u);
    expect(changed((copy) => Object.assign(field(copy, 7), { words: 2 }))[0]).toMatch(/ascii/u);
    expect(changed((copy) => Object.assign(copy.actions, { commit: { kind: "text", request: "A", reply: "A" } }))[0]).toMatch(/^actions\.commit/u);
  });
});
