import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { createLineDecoder, encodeLine } from "@/lib/serial/protocols/text/line";
import { compileDriver } from "@/lib/serial/driver/compile";
import { driverDefinitionSchema } from "@/lib/serial/driver/definition";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { lf8 } from "@/tests/unit/serial/simulated-rig";

const bytes = (text: string) => new TextEncoder().encode(text);
const text = (line: Uint8Array) => new TextDecoder().decode(line);
const { codec } = lf8;
const HPOS = "slots[4].placement.offsetPx";

function frameOf(line: string) {
  const [frame, ...more] = codec.createDecoder().push(bytes(line));
  expect(more).toEqual([]);
  if (!frame) throw new Error("no frame");
  return frame;
}

const readOf = (key: string) => {
  const [request] = codec.planReads([key]);
  if (!request) throw new Error("no read");
  return request;
};

describe("the text protocol", () => {
  // Source: the check figures of the bench drawing; CRC-16/XMODEM gives all three.
  it("writes the check field that the drawing of the wire log shows", () => {
    const write = codec.planWrite([{ key: HPOS, value: 12 }]);
    expect(write.ok && text(write.value.bytes)).toBe("SLOT4:HPOS 12*713F\n");
    expect(text(readOf(HPOS).bytes)).toBe("SLOT4:HPOS?*0585\n");
    expect(frameOf("SLOT4:HPOS=12*700D\n")).toMatchObject({ kind: "frame", text: "SLOT4:HPOS=12" });
  });

  it("matches a reply by what it names, and no other setting's", () => {
    expect(readOf(HPOS).match(frameOf("SLOT4:HPOS=12*700D\n"))).toMatchObject({ kind: "reply", values: { [HPOS]: 12 } });
    expect(readOf("slots[4].placement.offsetLines").match(frameOf("SLOT4:HPOS=12*700D\n"))).toEqual({ kind: "other" });
    expect(readOf("slots[5].placement.offsetPx").match(frameOf("SLOT4:HPOS=12*700D\n"))).toEqual({ kind: "other" });
  });

  it("tells a refusal of this request from one of another, and busy from both", () => {
    const { protocol } = lf8.definition;
    if (protocol.kind !== "text") throw new Error("not text");
    const line = (body: string) => frameOf(text(encodeLine(protocol, body)));
    expect(readOf(HPOS).match(line("SLOT4:HPOS!-222 Data out of range"))).toMatchObject({ kind: "refused", message: "Data out of range (-222)" });
    expect(readOf(HPOS).match(line("SLOT5:HPOS!-222 Data out of range"))).toEqual({ kind: "other" });
    expect(readOf(HPOS).match(line("SLOT4:HPOS!BUSY"))).toEqual({ kind: "busy" });
    expect(readOf(HPOS).match(line("SLOT4:HPOS=twelve"))).toMatchObject({ kind: "malformed" });
  });

  it("knows the length of a reply beforehand, for the value it is told", () => {
    expect(codec.planReads([HPOS], { [HPOS]: 12 })[0]?.replyBytes).toBe("SLOT4:HPOS=12*700D\n".length);
    expect(codec.planReads([HPOS], { [HPOS]: -5 })[0]?.replyBytes).toBe("SLOT4:HPOS=-5*0000\n".length);
  });

  it("gives the same frames however the bytes are cut", () => {
    const stream = bytes("SLOT4:HPOS=12*700D\nboot\nSLOT4:HPOS=12*700E\n");
    const whole = codec.createDecoder().push(stream);
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 1, max: 9 }), { minLength: 1, maxLength: 60 }), (sizes) => {
        const decoder = codec.createDecoder();
        const frames = [];
        let at = 0;
        for (const size of [...sizes, stream.length]) {
          frames.push(...decoder.push(stream.subarray(at, at + size)));
          at += size;
        }
        expect(frames).toEqual(whole);
      }),
    );
    expect(whole.map((frame) => (frame.kind === "noise" ? frame.why : frame.text))).toEqual(["SLOT4:HPOS=12", "no-check", "check"]);
  });

  it("takes no line in which any one byte was flipped, lost, doubled or put in", () => {
    const good = bytes("SLOT4:HPOS=12*700D\n");
    const accepted = (line: number[]) => codec.createDecoder().push(Uint8Array.from(line)).filter((frame) => frame.kind === "frame" && readOf(HPOS).match(frame).kind === "reply");
    for (let at = 0; at < good.length - 1; at += 1) {
      const [before, byte, after] = [[...good.subarray(0, at)], good[at] ?? 0, [...good.subarray(at + 1)]];
      for (let mask = 1; mask < 256; mask += 1) expect(accepted([...before, byte ^ mask, ...after])).toEqual([]);
      expect(accepted([...before, ...after])).toEqual([]);
      expect(accepted([...before, byte, byte, ...after])).toEqual([]);
      for (const extra of [0, 10, 42, 48, 255]) {
        const frames = accepted([...before, extra, byte, ...after]);
        // A line end put in before the first byte leaves the good line whole: the same value.
        for (const frame of frames) expect(readOf(HPOS).match(frame)).toMatchObject({ values: { [HPOS]: 12 } });
      }
    }
  });

  it("holds no more than one line, whatever arrives", () => {
    const decoder = createLineDecoder({ kind: "text", lineEnd: "\n", echo: false, uncheckedRequests: [], maxLineBytes: 64 });
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 5000 }), (noise) => {
        decoder.push(noise);
        expect(decoder.heldBytes).toBeLessThanOrEqual(65);
      }),
    );
    decoder.push(new Uint8Array(100_000).fill(65));
    expect(decoder.heldBytes).toBeLessThanOrEqual(65);
    expect(decoder.push(bytes("\nA=1\n")).at(-1)).toMatchObject({ kind: "frame", text: "A=1" });
  });
});

describe("a text driver that cannot work", () => {
  const changed = (change: (copy: typeof lanternfieldLf8) => unknown) => {
    const copy = structuredClone(lanternfieldLf8);
    change(copy);
    const compiled = compileDriver(driverDefinitionSchema.parse(copy));
    return compiled.ok ? [] : compiled.error.map(({ path, message }) => `${path}: ${message}`);
  };
  const wire = (copy: typeof lanternfieldLf8, index: number, part: "read" | "write", which: "request" | "reply", template: string) => {
    const one = copy.settings[index]?.wire;
    if (one?.kind !== "text" || !one[part]) throw new Error("not text");
    one[part][which] = template;
  };

  it("is told by path", () => {
    expect(changed((copy) => wire(copy, 0, "read", "reply", "TRIM:LEFT={value:float}"))[0]).toMatch(/^settings\[0\]\.wire\.read\.reply: .*unknown type/u);
    expect(changed((copy) => wire(copy, 0, "write", "request", "TRIM:LEFT"))[0]).toMatch(/^settings\[0\]\.wire\.write\.request: wants exactly one hole/u);
    expect(changed((copy) => wire(copy, 0, "read", "request", "TRIM{slot:int}?"))[0]).toMatch(/no number/u);
    expect(changed((copy) => wire(copy, 1, "read", "request", "TRIM:LEFT?"))[0]).toMatch(/begins like/u);
    expect(changed((copy) => wire(copy, 0, "read", "reply", "TRIM:LEFT={value:word}"))[0]).toMatch(/does not hold/u);
    expect(changed((copy) => Object.assign(copy.settings[0] ?? {}, { key: "everywhere.colour" }))[0]).toMatch(/neither a neutral path/u);
    expect(changed((copy) => Object.assign(copy.settings[0] ?? {}, { initial: 999 }))[0]).toMatch(/^settings\[0\]\.initial: 999 is outside/u);
    expect(changed((copy) => Object.assign(copy.factory, { "slots[99].name": "x" }))[0]).toMatch(/^factory\.slots\[99\]\.name/u);
    expect(changed((copy) => Object.assign(copy.protocol, { refusalReply: "ERR {code:int}" }))[0]).toMatch(/^protocol\.refusalReply: wants \{header/u);
    expect(changed((copy) => Object.assign(copy.slots, { count: 256 }) && Object.assign(copy.modes, { count: 256 }))).toEqual([]);
  });
});
