import { describe, expect, it } from "vitest";
import { createVirtualClock } from "@/lib/serial/clock/virtual-clock";
import { parseRecording, saveRecording } from "@/lib/serial/recording";
import { createWireLog, hexOf, MAX_EXCHANGES, printable } from "@/lib/serial/wire-log";
import { connect, lf8 } from "@/tests/unit/serial/simulated-rig";

const bytes = (text: string) => new TextEncoder().encode(text);

describe("the wire log", () => {
  it("keeps the last exchanges and counts what made room", () => {
    const clock = createVirtualClock();
    const log = createWireLog({ clock });
    for (let index = 0; index < MAX_EXCHANGES + 5; index += 1) log.in(bytes("A\n"), { exchange: log.out(bytes("A?\n")) });
    expect(log.entries()).toHaveLength(2 * MAX_EXCHANGES);
    expect([log.exchangeCount, log.droppedCount]).toEqual([MAX_EXCHANGES + 5, 10]);
    expect(log.entries()[0]?.number).toBe(11);
    expect(log.entries().at(-1)?.number).toBe(2 * MAX_EXCHANGES + 10);
  });

  it("says how long each reply took and what it answered", async () => {
    const clock = createVirtualClock();
    const log = createWireLog({ clock });
    const number = log.out(bytes("A?\n"));
    await clock.advance(9);
    log.in(bytes("A=1\n"), { exchange: number });
    log.in(bytes("hot\n"), { note: "unasked" });
    expect(log.entries().map(({ exchange, tookMs, note }) => [exchange, tookMs, note])).toEqual([[1, undefined, undefined], [1, 9, undefined], [undefined, undefined, "unasked"]]);
  });

  // Source: the wire log of the bench drawing.
  it("shows text and hex", () => {
    const line = bytes("SLOT4:HPOS 12*713F\n");
    expect(printable(line)).toBe("SLOT4:HPOS 12*713F");
    expect(hexOf(line)).toBe("53 4C 4F 54 34 3A 48 50 4F 53 20 31 32 2A 37 31 33 46 0A");
    expect(printable(Uint8Array.from([0, 65, 200]))).toBe("·A·");
  });

  it("tells listeners of each entry until they go", () => {
    const log = createWireLog({ clock: createVirtualClock() });
    const seen: string[] = [];
    const stop = log.onEntry((entry) => seen.push(entry.text));
    log.event("one");
    stop();
    log.event("two");
    log.clear();
    log.event("three");
    expect(seen).toEqual(["one"]);
    expect(log.entries().map((entry) => entry.text)).toEqual(["three"]);
  });
});

describe("a recording", () => {
  const NAME = "Cabinet A, upright";
  async function exchange() {
    const rig = await connect(lf8, { serialNumber: "LF8-7731", values: { "slots[2].name": "Family day" } });
    await rig.clock.run(rig.session.read(["slots[2].name", "slots[1].placement.offsetPx", "modes[1].name"]));
    await rig.clock.run(rig.session.write([{ key: "slots[1].name", value: NAME.slice(0, 16) }]));
    rig.device.setFault(() => ({ kind: "silent" }));
    await rig.clock.run(rig.session.write([{ key: "slots[1].name", value: "Family day" }]));
    rig.plug.far?.blast(bytes("SLOT2:NAME=Family da"));
    await rig.clock.advance(10);
    await rig.clock.run(rig.session.close());
    return rig.wireLog.entries();
  }

  it("holds every byte both ways, with its time, and comes back as it was saved", async () => {
    const entries = await exchange();
    const parsed = parseRecording(saveRecording(lf8, entries, { strikeOut: false }));
    if (!parsed.ok) throw new Error(parsed.error[0]?.message);
    expect(parsed.value.head).toMatchObject({ driver: { slug: "lanternfield-lf8", version: "1.0.0" }, startedAt: "2026-01-01T00:00:00.000Z", struckOut: false });
    expect(parsed.value.lines).toHaveLength(entries.length);
    for (const [index, line] of parsed.value.lines.entries()) {
      const entry = entries[index];
      if (line.direction === "event") expect(line.text).toBe(entry?.text);
      else expect(line.bytes).toEqual(entry?.bytes);
      expect(line.atMs).toBeCloseTo((entry?.atMs ?? 0) - (entries[0]?.atMs ?? 0), 3);
    }
  });

  it("can be saved without names and serial numbers, each line as long as before and with a right check", async () => {
    const entries = await exchange();
    const text = saveRecording(lf8, entries, { strikeOut: true });
    const parsed = parseRecording(text);
    if (!parsed.ok) throw new Error(parsed.error[0]?.message);
    const said = parsed.value.lines.map((line) => (line.direction === "event" ? line.text : printable(line.bytes))).join("\n");
    for (const secret of ["7731", "Family", "day", "Cabinet", "240p60"]) expect(said).not.toContain(secret);
    expect(said).toContain("SLOT2:NAME=xxxxxxxxxx*");
    expect(said).toContain("Lanternfield,LF-8,xxxxxxxx,3.4*");
    expect(said).toContain("SLOT1:HPOS=0*");
    for (const [index, line] of parsed.value.lines.entries()) {
      if (line.direction === "event") continue;
      expect(line.bytes).toHaveLength(entries[index]?.bytes.length ?? -1);
      if (entries[index]?.note === undefined) expect(lf8.codec.createDecoder().push(line.bytes)).toMatchObject([{ kind: "frame" }]);
    }
  });

  it.each([
    ["", "head"],
    ["{}", "head"],
    ["not json", "head"],
  ])("is refused where it is none: %s", (text, part) => {
    const parsed = parseRecording(text);
    expect(parsed.ok ? "" : parsed.error[0]?.message).toContain(part);
  });

  it("names the lines that make no sense", async () => {
    const text = saveRecording(lf8, [], { strikeOut: false });
    const parsed = parseRecording(`${text}{"atMs":1,"direction":"out","hex":"5"}\n{"atMs":2,"direction":"out","hex":"53"}\nwhat\n`);
    expect(parsed.ok ? [] : parsed.error.map(({ path }) => path)).toEqual(["2", "4"]);
  });
});
