import { describe, expect, it } from "vitest";
import { takeBackup } from "@/lib/serial/backup/take-backup";
import { createVirtualClock } from "@/lib/serial/clock/virtual-clock";
import { driverDefinitionSchema, type DriverDefinition } from "@/lib/serial/driver/definition";
import { parseRecording, recordingText, saveRecording, type Recording } from "@/lib/serial/recording";
import { compareRecording } from "@/lib/serial/replay/compare-recording";
import { playThrough } from "@/lib/serial/replay/play-through";
import { createReplayPort } from "@/lib/serial/replay/replay-port";
import { strikeOutRecording } from "@/lib/serial/replay/strike-out-recording";
import { openSession } from "@/lib/serial/session/open-session";
import { createWireLog } from "@/lib/serial/wire-log";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { createDeviceModel } from "@/lib/serial/simulator/device-model";
import { createSimulatedDevicePort } from "@/lib/serial/simulator/simulated-device-port";
import { compiled } from "@/tests/unit/serial/simulated-rig";
import { smallDrivers } from "@/tests/unit/serial/small-drivers";

const drivers = smallDrivers.map(compiled);
const [lf8, brackenrow] = drivers as [CompiledDriver, CompiledDriver];

function parsed(text: string): Recording {
  const recording = parseRecording(text);
  if (!recording.ok) throw new Error(recording.error[0]?.message);
  return recording.value;
}

async function recorded(driver: CompiledDriver, strikeOut: boolean): Promise<Recording> {
  const clock = createVirtualClock();
  const model = createDeviceModel(driver, { clock, values: { "slots[1].name": "SECRET" }, serialNumber: "QZ-7731-88" });
  const { port } = createSimulatedDevicePort({ model, transport: driver.definition.transport, clock, pacing: "none" });
  const wireLog = createWireLog({ clock });
  const opened = await clock.run(openSession({ port, driver, clock, wireLog }));
  if (!opened.ok) throw new Error(JSON.stringify(opened.error));
  const { session } = opened.value;
  expect((await clock.run(takeBackup(session, driver))).ok).toBe(true);
  await clock.run(session.recall(2));
  await clock.run(session.recall(driver.definition.slots.first + driver.definition.slots.count));
  await clock.run(session.close());
  return parsed(saveRecording(driver, wireLog.entries(), { strikeOut }));
}

const kept = new Map<string, Promise<Recording>>();

/** A session over a simulated device: identity, a whole read, a recall, a refused one. Made once for each driver. */
function record(driver: CompiledDriver, strikeOut = false): Promise<Recording> {
  const id = `${driver.definition.slug} ${strikeOut}`;
  const made = kept.get(id) ?? recorded(driver, strikeOut);
  kept.set(id, made);
  return made;
}

/** The recording with one byte of its n-th request (from 1) turned over. */
function changed(recording: Recording, exchange: number, offset: number): Recording {
  let count = 0;
  const lines = recording.lines.map((line) => {
    if (line.direction === "out") count += 1;
    if (line.direction !== "out" || count !== exchange) return line;
    return { ...line, bytes: line.bytes.map((byte, at) => (at === offset ? byte ^ 1 : byte)) };
  });
  return { ...recording, lines };
}

const edited = (definition: DriverDefinition, edit: (text: string) => string) => compiled(driverDefinitionSchema.parse(JSON.parse(edit(JSON.stringify(definition)))));

describe.each(drivers.map((driver) => [driver.definition.slug, driver] as const))("a recording of %s", (_slug, driver) => {
  it("plays back as a device that a session opens and backs up, byte for byte", async () => {
    const recording = await record(driver);
    const clock = createVirtualClock();
    const { port, device } = createReplayPort(recording, { clock, transport: driver.definition.transport, pace: "recorded" });
    const opened = await clock.run(openSession({ port, driver, clock, wireLog: createWireLog({ clock }) }));
    if (!opened.ok) throw new Error(JSON.stringify(opened.error));
    const backup = await clock.run(takeBackup(opened.value.session, driver));
    expect(backup.ok && backup.value.content.values["slots[1].name"]).toBe("SECRET");
    expect(await clock.run(opened.value.session.recall(2))).toMatchObject({ ok: true });
    expect(device.outcome.kind).toBe("playing");
    expect(await clock.run(opened.value.session.recall(driver.definition.slots.first + driver.definition.slots.count))).toMatchObject({ ok: false, error: { code: "refused" } });
    expect(device.outcome).toEqual({ kind: "finished" });
    await clock.run(opened.value.session.close());
  });

  it("fails at the first byte that the host says differently, and says where", async () => {
    const recording = changed(await record(driver), 3, 4);
    const clock = createVirtualClock();
    const { port, device } = createReplayPort(recording, { clock, transport: driver.definition.transport, pace: "recorded" });
    const opened = await clock.run(openSession({ port, driver, clock, wireLog: createWireLog({ clock }) }));
    if (!opened.ok) throw new Error(JSON.stringify(opened.error));
    expect(await clock.run(takeBackup(opened.value.session, driver))).toMatchObject({ ok: false, error: { code: "lost" } });
    const outs = recording.lines.flatMap((line, index) => (line.direction === "out" ? [{ ...line, at: index + 2 }] : []));
    const expected = outs[2]?.bytes[4];
    expect(device.outcome).toEqual({ kind: "differs", difference: { exchange: 3, line: outs[2]?.at, offset: 4, expected, got: (expected ?? 0) ^ 1 } });
    expect(opened.value.session.state.name).toBe("lost");
  });

  it("agrees with the driver that made it, in what is said and in what is read, struck out or not", async () => {
    for (const recording of [await record(driver), await record(driver, true)]) {
      const compared = compareRecording(driver, recording);
      expect(compared).toMatchObject({ differences: [], unanswered: 0, unasked: 0 });
      expect(compared.exchanges.at(-1)?.answer?.kind).toBe("refused");
      expect(Object.keys(compared.values).sort()).toEqual(driver.settings.filter(({ readable }) => readable).map(({ key }) => key).sort());
      const clock = createVirtualClock();
      expect(await clock.run(playThrough(driver, recording, compared, clock))).toEqual({ kind: "played", exchanges: compared.exchanges.length });
      expect(clock.pendingTimers()).toBe(0);
    }
  });

  it("shows at which byte a changed request differs", async () => {
    const recording = changed(await record(driver), 4, 3);
    const [first] = compareRecording(driver, recording).differences;
    expect(first).toMatchObject({ kind: "says", exchange: 4, offset: 3 });
    expect(first?.got).not.toBe(first?.expected);
  });

  it("is struck out afterwards as it would have been when it was saved, and reads the same again", async () => {
    const whole = await record(driver);
    const struck = strikeOutRecording(driver, whole);
    expect(struck).toEqual({ ...(await record(driver, true)), head: struck.head });
    expect(parsed(recordingText(struck))).toEqual(struck);
  });
});

describe("a driver that says or reads something else", () => {
  it("is found out at the header that it renamed, with the byte where it parts", async () => {
    const recording = await record(lf8);
    const renamed = edited(lf8.definition, (text) => text.replaceAll("TRIM:LEFT", "TRIM:LFT"));
    const apart = compareRecording(renamed, recording);
    const [first] = apart.differences;
    // `TRIM:LEFT?` against `TRIM:LFT?`: the seventh byte, E against F.
    expect(first).toMatchObject({ kind: "says", offset: 6, expected: 0x45, got: 0x46 });
    const clock = createVirtualClock();
    expect(await clock.run(playThrough(renamed, recording, apart, clock))).toMatchObject({ kind: "differs", difference: { offset: 6, expected: 0x45, got: 0x46 } });
  });

  it("is found out where it cannot read an answer", async () => {
    const recording = await record(lf8);
    const misread = edited(lf8.definition, (text) => text.replace('"reply":"TRIM:LEFT={value:int}"', '"reply":"TRIM:LEFT={value:fixed1}"'));
    expect(compareRecording(misread, recording).differences[0]).toMatchObject({ kind: "reads" });
  });

  it("with fewer requests under way is still answered", async () => {
    const recording = await record(lf8);
    const patient = compiled(driverDefinitionSchema.parse({ ...lf8.definition, pace: { ...lf8.definition.pace, inFlight: 1 } }));
    const compared = compareRecording(patient, recording);
    const clock = createVirtualClock();
    expect(await clock.run(playThrough(patient, recording, compared, clock))).toMatchObject({ kind: "played" });
  });

  it("for another device differs at once, and the comparison ends early", async () => {
    const compared = compareRecording(brackenrow, await record(lf8));
    expect(compared.differences.length).toBe(20);
    expect(compared.exchanges.length).toBeLessThanOrEqual(21);
  });
});
