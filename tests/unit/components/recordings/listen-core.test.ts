import { describe, expect, it } from "vitest";
import { byteWords, comparisonOf, markedLines } from "@/components/recordings/comparison";
import { createListenCore } from "@/components/recordings/listen/listen-core";
import { heardRecording, heardText } from "@/components/recordings/listen/listened";
import { parseRecording, type Recording } from "@/lib/serial/recording";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { compiled, plugIn } from "@/tests/unit/serial/simulated-rig";
import { smallDrivers } from "@/tests/unit/serial/small-drivers";

const drivers = smallDrivers.map(compiled);
const [lf8] = drivers as [CompiledDriver];

/** Everything read from a simulated device, and what was heard of it. */
async function listenTo(driver: CompiledDriver) {
  const { clock, device, plug } = plugIn(driver, {}, undefined, "none");
  const core = createListenCore(clock);
  await clock.run(core.readWith(plug.port, driver));
  return { clock, device, core };
}

async function heardFrom(driver: CompiledDriver): Promise<Recording> {
  const { clock, core } = await listenTo(driver);
  await clock.run(core.stop());
  const { entries, line } = core.store.getState();
  const parsed = parseRecording(heardText(entries, line, { slug: "", strikeOut: false }));
  if (!parsed.ok) throw new Error(parsed.error[0]?.message);
  return parsed.value;
}

/** One byte of the n-th request (from 1) turned over. */
function changed(recording: Recording, exchange: number): Recording {
  let count = 0;
  const lines = recording.lines.map((line) => {
    if (line.direction === "out") count += 1;
    return line.direction === "out" && count === exchange ? { ...line, bytes: line.bytes.map((byte, at) => (at === 1 ? byte ^ 1 : byte)) } : line;
  });
  return { ...recording, lines };
}

describe.each(drivers.map((driver) => [driver.definition.slug, driver] as const))("listening to %s", (_slug, driver) => {
  it("reads everything and changes nothing", async () => {
    const { core, device } = await listenTo(driver);
    const { link, said, line } = core.store.getState();
    expect({ link, kind: line?.kind }).toEqual({ link: "listening", kind: "driver" });
    expect(said).toMatch(/^\d+ values were read\.$/u);
    const { writes, recalls, commits } = device.counts;
    expect({ writes, recalls, commits }).toEqual({ writes: 0, recalls: 0, commits: 0 });
    expect(core.send(Uint8Array.of(1))).toEqual({ ok: false, error: "Nothing is sent on this line." });
    expect(device.counts.writes).toBe(0);
  });

  it("makes a recording that the same driver says byte for byte, and that plays back as the device", async () => {
    const recording = await heardFrom(driver);
    const compared = comparisonOf(driver.definition, recording);
    expect(compared.kind === "compared" && compared.result.differences).toEqual([]);
    const { clock, core } = await listenTo(driver);
    await clock.run(core.replay(recording, driver));
    expect(core.store.getState().said).toMatch(/^\d+ values were read\. The recording went along with the driver for \d+ exchanges\.$/u);
  });
});

describe("a recording that the driver does not say", () => {
  it("ends the line at the first byte that differs, and says where", async () => {
    const recording = changed(await heardFrom(lf8), 5);
    const compared = comparisonOf(lf8.definition, recording);
    const [line] = markedLines(compared);
    const { clock, core } = await listenTo(lf8);
    await clock.run(core.replay(recording, lf8));
    expect(line).toBeGreaterThan(1);
    expect(core.store.getState().said).toContain(`exchange 5, line ${line}, byte 1: expected`);
  });

  it("is not compared with a definition that does not compile", () => {
    const compared = comparisonOf({ slug: "x" }, { head: heardRecording([], null, "x").head, lines: [] });
    expect(compared.kind).toBe("no-driver");
    expect(markedLines(compared)).toEqual([]);
  });

  it("shows a byte as hex, and as the character that it stands for", () => {
    expect([byteWords(0x48), byteWords(0x0a), byteWords(null)]).toEqual(["48, “H”", "0A", "nothing"]);
  });
});

describe("a line without a driver", () => {
  async function raw() {
    const { clock, device, plug } = plugIn(lf8, {}, undefined, "none");
    const core = createListenCore(clock);
    await clock.run(core.listenRaw(plug.port, lf8.definition.transport));
    return { clock, device, core };
  }

  it("sends nothing by itself, and keeps what comes", async () => {
    const { clock, device, core } = await raw();
    await clock.advance(60_000);
    expect(core.wireLog.entries().filter(({ direction }) => direction === "out")).toEqual([]);
    expect(device.counts).toMatchObject({ reads: 0, writes: 0, recalls: 0, commits: 0 });
    // The query of IEEE 488.2 for who is there.
    expect(core.send(new TextEncoder().encode("*IDN?\n")).ok).toBe(true);
    await clock.advance(5000);
    const texts = core.store.getState().entries.map(({ direction, text }) => `${direction} ${text}`);
    expect(texts[0]).toBe("out *IDN?");
    expect(texts.slice(1).join("")).toContain("Lanternfield");
    await clock.run(core.stop());
  });

  it("names its recording after the device that has no driver yet", async () => {
    const { clock, core } = await raw();
    core.send(new TextEncoder().encode("*IDN?\n"));
    await clock.advance(5000);
    await clock.run(core.stop());
    const { entries, line } = core.store.getState();
    const parsed = parseRecording(heardText(entries, line, { slug: "attic-box", strikeOut: true }));
    expect(parsed.ok && parsed.value.head).toMatchObject({ driver: { slug: "attic-box", version: "0.0.0" }, struckOut: false });
  });

  it("says that the plug was pulled, and sends nothing afterwards", async () => {
    const { clock, plug } = plugIn(lf8, {}, undefined, "none");
    const core = createListenCore(clock);
    await clock.run(core.listenRaw(plug.port, lf8.definition.transport));
    plug.unplug();
    await clock.advance(1000);
    expect(core.store.getState().link).toBe("lost");
    expect(core.send(Uint8Array.of(1)).ok).toBe(false);
  });
});
