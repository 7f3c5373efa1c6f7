import { describe, expect, it } from "vitest";
import { encodeLine } from "@/lib/serial/protocols/text/line";
import { openSession } from "@/lib/serial/session/open-session";
import { takeBackup } from "@/lib/serial/backup/take-backup";
import type { SessionState } from "@/lib/serial/session/types";
import { faultAtByte, type WireFault } from "@/lib/serial/simulator/wire-fault";
import { connect, lf8, plugIn, type Rig } from "@/tests/unit/serial/simulated-rig";

const HPOS = "slots[1].placement.offsetPx";
const FAN = "native.fanPct";
const { protocol, pace } = lf8.definition;
const lineOf = (body: string) => {
  if (protocol.kind !== "text") throw new Error("not text");
  return encodeLine(protocol, body);
};

/** What left for the device since `from`, as text without its check. */
const sent = (rig: Pick<Rig, "wireLog">, from = 0) =>
  rig.wireLog.entries().filter((entry) => entry.direction === "out" && entry.number > from).map((entry) => entry.text.replace(/\*[0-9A-F]{4}$/u, ""));
const lastNumber = (rig: Rig) => rig.wireLog.entries().at(-1)?.number ?? 0;

/** Ends the session and asserts that nothing of it is left: no timer, no locked stream, a port that opens again. */
async function endCleanly(rig: Pick<Rig, "clock" | "plug" | "session">) {
  await rig.clock.run(rig.session.close());
  expect(rig.clock.pendingTimers()).toBe(0);
  await rig.clock.run(rig.plug.port.open({ baudRate: 115_200 }));
  await rig.clock.run(rig.plug.port.close());
}

describe("opening", () => {
  it("asks twice who is there and goes from closed to ready", async () => {
    const rig = plugIn();
    const states: SessionState["name"][] = [];
    const opened = await rig.clock.run(openSession({ port: rig.plug.port, driver: lf8, clock: rig.clock, wireLog: rig.wireLog, onState: (state) => states.push(state.name) }));
    expect(states).toEqual(["opening", "identifying", "ready"]);
    expect(sent(rig)).toEqual(["*IDN?", "*IDN?"]);
    expect(opened).toMatchObject({ ok: true, value: { identity: { maker: "Lanternfield", model: "LF-8", serialNumber: "LF8-0001", firmware: "3.4" } } });
    if (opened.ok) await endCleanly({ ...rig, session: opened.value.session });
  });

  it("bears boot chatter and another program's words before the first answer", async () => {
    const rig = plugIn();
    rig.clock.after(60, () => rig.device.restart());
    rig.clock.after(20, () => rig.device.receive(new TextEncoder().encode("AT+GMM\rAT\r")));
    const opened = await rig.clock.run(openSession({ port: rig.plug.port, driver: lf8, clock: rig.clock, wireLog: rig.wireLog }));
    expect(opened.ok).toBe(true);
    if (opened.ok) await endCleanly({ ...rig, session: opened.value.session });
  });

  it("says which device answered when it is another one, and gives the port back", async () => {
    const other = structuredClone(lf8.definition);
    const rig = plugIn();
    const wanted = { ...lf8, definition: { ...other, model: "LF-9" } };
    const opened = await rig.clock.run(openSession({ port: rig.plug.port, driver: wanted, clock: rig.clock, wireLog: rig.wireLog }));
    expect(opened).toEqual({ ok: false, error: { code: "other-device", found: "Lanternfield LF-8", wanted: "Lanternfield LF-9" } });
    expect(rig.clock.pendingTimers()).toBe(0);
    expect(rig.device.counts.writes).toBe(0);
  });

  it("says that nobody answers at the wrong speed", async () => {
    const rig = plugIn();
    const wrong = { ...lf8, definition: { ...lf8.definition, transport: { ...lf8.definition.transport, baudRate: 9600 } } };
    const opened = await rig.clock.run(openSession({ port: rig.plug.port, driver: wrong, clock: rig.clock, wireLog: rig.wireLog }));
    expect(opened).toMatchObject({ ok: false, error: { code: "silent" } });
    expect(rig.clock.pendingTimers()).toBe(0);
  });

  it("tells a refused port from one that is open already", async () => {
    const rig = plugIn();
    await rig.clock.run(rig.plug.port.open({ baudRate: 115_200 }));
    const taken = await rig.clock.run(openSession({ port: rig.plug.port, driver: lf8, clock: rig.clock, wireLog: rig.wireLog }));
    expect(taken).toEqual({ ok: false, error: { code: "already-open" } });
    rig.plug.unplug();
    const gone = plugIn();
    const { port } = gone.plug;
    gone.plug.unplug();
    expect(await gone.clock.run(openSession({ port, driver: lf8, clock: gone.clock, wireLog: gone.wireLog }))).toEqual({ ok: false, error: { code: "open-refused" } });
  });

  it("can be called off", async () => {
    const rig = plugIn();
    const abort = new AbortController();
    rig.clock.after(150, () => abort.abort());
    const opened = await rig.clock.run(openSession({ port: rig.plug.port, driver: lf8, clock: rig.clock, wireLog: rig.wireLog, signal: abort.signal }));
    expect(opened.ok).toBe(false);
    expect(rig.clock.pendingTimers()).toBe(0);
  });
});

describe("requests", () => {
  it("reads, writes, reads back, recalls and commits on the real device model", async () => {
    const rig = await connect();
    const { clock, session, device } = rig;
    expect(await clock.run(session.write([{ key: HPOS, value: 12 }]))).toEqual({ ok: true, value: { outcome: "acknowledged" } });
    expect(await clock.run(session.read([HPOS]))).toEqual({ ok: true, value: { [HPOS]: 12 } });
    expect(await clock.run(session.committed())).toEqual({ ok: true, value: false });
    expect(await clock.run(session.recall(2))).toEqual({ ok: true, value: { outcome: "acknowledged" } });
    expect(await clock.run(session.activeSlot())).toEqual({ ok: true, value: 2 });
    expect(await clock.run(session.rasterOut())).toEqual({ ok: true, value: device.rasterOut });
    expect(await clock.run(session.commit())).toEqual({ ok: true, value: { outcome: "acknowledged" } });
    expect(await clock.run(session.committed())).toEqual({ ok: true, value: true });
    expect(await clock.run(session.bootCount())).toEqual({ ok: true, value: 1 });
    expect(await clock.run(session.arriving())).toEqual({ ok: true, value: { input: "digital-1", format: device.source, locked: true } });
    expect(device.counts).toMatchObject({ writes: 1, recalls: 1, commits: 1, refusals: 0 });
    await endCleanly(rig);
  });

  it("says that nothing arrives and nothing is out", async () => {
    const rig = await connect(lf8, { source: null });
    expect(await rig.clock.run(rig.session.arriving())).toMatchObject({ ok: true, value: { format: null, locked: false } });
    expect(await rig.clock.run(rig.session.rasterOut())).toMatchObject({ ok: true, value: { horizontal: { active: 720 } } });
    await endCleanly(rig);
  });

  it("answers with the device's refusal and does not ask again", async () => {
    const rig = await connect();
    const from = lastNumber(rig);
    const refused = await rig.clock.run(rig.session.write([{ key: HPOS, value: 60 }]));
    expect(refused).toMatchObject({ ok: false, error: { code: "refused" } });
    expect(await rig.clock.run(rig.session.timer("confirm"))).toEqual({ ok: true, value: "refused" });
    expect(sent(rig, from)).toEqual(["SLOT1:HPOS 60", "TIMER:CONFIRM"]);
    await endCleanly(rig);
  });

  it("keeps the driver's unknown words to itself", async () => {
    const rig = await connect();
    const from = lastNumber(rig);
    expect(await rig.clock.run(rig.session.mute(true))).toMatchObject({ ok: false, error: { code: "unsupported" } });
    expect(await rig.clock.run(rig.session.read(["slots[9].name"]))).toMatchObject({ ok: false, error: { code: "unsupported" } });
    expect(await rig.clock.run(rig.session.write([{ key: HPOS, value: 1 }, { key: FAN, value: 40 }]))).toMatchObject({ ok: false, error: { code: "unsupported" } });
    expect(sent(rig, from)).toEqual([]);
    await endCleanly(rig);
  });

  it("has four reads in flight at most, and a write alone", async () => {
    const rig = await connect();
    let open = 0;
    let most = 0;
    const alone: number[] = [];
    rig.wireLog.onEntry((entry) => {
      if (entry.direction === "event") return;
      open += entry.direction === "out" ? 1 : -1;
      most = Math.max(most, open);
      if (entry.direction === "out" && entry.text.includes("HPOS ")) alone.push(open);
    });
    const keys = lf8.settings.slice(0, 40).map((setting) => setting.key);
    const both = Promise.all([rig.session.read(keys), rig.session.write([{ key: HPOS, value: 3 }]), rig.session.read(keys)]);
    expect((await rig.clock.run(both)).every((result) => result.ok)).toBe(true);
    expect([most, alone]).toEqual([pace.inFlight, [1]]);
    await endCleanly(rig);
  });

  it("asks a busy device again for a read, with longer pauses, and never for a write", async () => {
    const rig = await connect();
    let busyLeft = 2;
    rig.device.setFault(() => (busyLeft-- > 0 ? { kind: "busy" } : undefined));
    const from = lastNumber(rig);
    expect(await rig.clock.run(rig.session.read([FAN]))).toMatchObject({ ok: true });
    expect(sent(rig, from)).toHaveLength(3);
    rig.device.setFault(() => ({ kind: "busy" }));
    expect(await rig.clock.run(rig.session.write([{ key: FAN, value: 60 }]))).toMatchObject({ ok: false, error: { code: "busy" } });
    expect(await rig.clock.run(rig.session.read([FAN]))).toMatchObject({ ok: false, error: { code: "busy" } });
    expect(sent(rig, from)).toHaveLength(3 + 1 + 1 + pace.retries);
    await endCleanly(rig);
  });
});

describe("when answers do not come", () => {
  const silent = (rig: Rig) => rig.device.setFault(() => ({ kind: "silent" }));

  it("sends a recall and a commit once, and says that nobody knows", async () => {
    const rig = await connect();
    silent(rig);
    expect(await rig.clock.run(rig.session.recall(2))).toMatchObject({ ok: true, value: { outcome: "unknown" } });
    expect(await rig.clock.run(rig.session.commit())).toMatchObject({ ok: true, value: { outcome: "unknown" } });
    expect(await rig.clock.run(rig.session.write([{ key: FAN, value: 60 }]))).toMatchObject({ ok: true, value: { outcome: "unknown" } });
    expect(rig.device.counts).toMatchObject({ recalls: 1, commits: 1, writes: 1 });
    await endCleanly(rig);
  });

  it("asks a read again as often as the driver says, then says what it waited for", async () => {
    const rig = await connect();
    silent(rig);
    const from = lastNumber(rig);
    const result = await rig.clock.run(rig.session.read([HPOS]));
    expect(result).toEqual({ ok: false, error: { code: "timeout", message: "No answer to “SLOT1:HPOS?” within 600 ms." } });
    expect(sent(rig, from)).toHaveLength(1 + pace.retries);
    rig.device.setFault(null);
    expect(await rig.clock.run(rig.session.read([HPOS]))).toMatchObject({ ok: true });
    await endCleanly(rig);
  });

  it("asks again for an act of the device timer", async () => {
    const rig = await connect();
    let first = true;
    rig.device.setFault(() => (first ? ((first = false), { kind: "silent" }) : undefined));
    expect(await rig.clock.run(rig.session.timer("arm", 30))).toEqual({ ok: true, value: "done" });
    expect(rig.device.timerArmed).toBe(true);
    expect(await rig.clock.run(rig.session.timer("disarm"))).toEqual({ ok: true, value: "done" });
    await endCleanly(rig);
  });

  it("takes no late reply for the answer to a later request", async () => {
    const rig = await connect();
    let held = 0;
    const late: WireFault = {
      onByte: (_byte, _index, direction) => (direction === "device-to-host" && (held += 1) === 1 ? { kind: "delay", delayMs: 800 } : { kind: "pass" }),
    };
    rig.plug.setFault(late);
    const reading = rig.session.read([HPOS]);
    const result = await rig.clock.run(reading);
    expect(result).toEqual({ ok: true, value: { [HPOS]: 0 } });
    expect(rig.wireLog.entries().filter((entry) => entry.note === "late")).toHaveLength(1);
    await endCleanly(rig);
  });

  it("does not take a doubled reply for the acknowledgement of a write", async () => {
    const rig = await connect();
    await rig.clock.run(rig.session.read([HPOS]));
    const writing = rig.session.write([{ key: HPOS, value: 7 }]);
    // An old reply to the read, once more, while the write is on its way.
    rig.plug.far?.blast(lineOf("SLOT1:HPOS=0"));
    expect(await rig.clock.run(writing)).toMatchObject({ ok: true, value: { outcome: "unknown" } });
    expect(await rig.clock.run(rig.session.read([HPOS]))).toEqual({ ok: true, value: { [HPOS]: 7 } });
    await endCleanly(rig);
  });

  it("gives lines that nobody asked for to the listener and to no request", async () => {
    const rig = await connect();
    const reading = rig.session.read([HPOS, FAN]);
    rig.plug.far?.blast(lineOf("SLOT2:HPOS=5"));
    rig.plug.far?.blast(new TextEncoder().encode("hot\n"));
    expect(await rig.clock.run(reading)).toEqual({ ok: true, value: { [HPOS]: 0, [FAN]: 40 } });
    expect(rig.wireLog.entries().map((entry) => entry.note).filter(Boolean)).toEqual(["unasked", "noise"]);
    await endCleanly(rig);
  });

  it("gives up a line that never falls silent", async () => {
    const rig = await connect();
    silent(rig);
    const chatter = () => {
      rig.plug.far?.blast(new TextEncoder().encode("noise"));
      if (rig.session.state.name !== "lost") rig.clock.after(100, chatter);
    };
    chatter();
    expect(await rig.clock.run(rig.session.read([HPOS]))).toMatchObject({ ok: false, error: { code: "lost" } });
    expect(rig.session.state).toMatchObject({ name: "lost", cause: "The line does not fall silent." });
    await rig.clock.advance(200);
    await endCleanly(rig);
  });
});

describe("calling off", () => {
  it("settles at once wherever the request is, and leaves a line that works", async () => {
    for (let afterMs = 0; afterMs < 12; afterMs += 1) {
      const rig = await connect();
      const abort = new AbortController();
      const keys = lf8.settings.slice(0, 30).map((setting) => setting.key);
      const reading = rig.session.read(keys, abort.signal);
      const other = rig.session.read([HPOS]);
      rig.clock.after(afterMs, () => abort.abort());
      expect(await rig.clock.run(reading)).toMatchObject({ ok: false, error: { code: "aborted" } });
      expect(await rig.clock.run(other)).toEqual({ ok: true, value: { [HPOS]: 0 } });
      expect(await rig.clock.run(rig.session.read([FAN]))).toEqual({ ok: true, value: { [FAN]: 40 } });
      await endCleanly(rig);
    }
  });
});

describe("when the port goes", () => {
  it.each(["stream-first", "event-first"] as const)("settles every request once, %s", async (order) => {
    const rig = await connect();
    const states: string[] = [];
    rig.session.onState((state) => states.push(state.name));
    const keys = lf8.settings.slice(0, 60).map((setting) => setting.key);
    const all = Promise.all([rig.session.read(keys), rig.session.readWhole(), takeBackup(rig.session, lf8)]);
    rig.clock.after(20, () => rig.plug.unplug(order));
    for (const result of await rig.clock.run(all)) expect(result).toMatchObject({ ok: false, error: { code: "lost" } });
    expect(states).toEqual(["lost"]);
    expect(await rig.clock.run(rig.session.read([HPOS]))).toMatchObject({ ok: false, error: { code: "lost" } });
    await rig.clock.run(rig.session.close());
    // The device has power still and works off what it was asked.
    await rig.clock.advance(20);
    expect([rig.clock.pendingTimers(), rig.device.counts.writes]).toEqual([0, 0]);
    const port = rig.plug.replug();
    expect(await rig.clock.run(openSession({ port, driver: lf8, clock: rig.clock, wireLog: rig.wireLog }))).toMatchObject({ ok: true });
  });

  it.each(["parity", "framing", "break", "overrun", "system"] as const)("reads on after a %s error", async (fault) => {
    const rig = await connect();
    const reading = rig.session.read([HPOS, FAN]);
    rig.plug.far?.faultOnRead(fault);
    expect(await rig.clock.run(reading)).toEqual({ ok: true, value: { [HPOS]: 0, [FAN]: 40 } });
    expect(rig.session.state.name).toBe("ready");
    expect(rig.wireLog.entries().some((entry) => entry.direction === "event" && entry.text.startsWith("The line broke"))).toBe(true);
    await endCleanly(rig);
  });

  it("writes on after an error of the system while writing", async () => {
    const rig = await connect();
    rig.plug.far?.faultOnWrite("system");
    expect(await rig.clock.run(rig.session.read([HPOS]))).toEqual({ ok: true, value: { [HPOS]: 0 } });
    await endCleanly(rig);
  });

  it("closes within its time although the device takes no bytes", async () => {
    const rig = await connect();
    rig.plug.setFault({ onByte: (_byte, _index, direction) => (direction === "host-to-device" ? { kind: "stall" } : { kind: "pass" }) });
    const reading = rig.session.read([HPOS]);
    await rig.clock.run(rig.session.close());
    expect(await rig.clock.run(reading)).toMatchObject({ ok: false, error: { code: "lost" } });
    // The simulated system has one last task of its own.
    await rig.clock.advance(1);
    expect([rig.clock.pendingTimers(), rig.session.state.name]).toEqual([0, "closed"]);
  });
});

describe("a device that restarts", () => {
  it("is read again from the beginning", async () => {
    const rig = await connect();
    await rig.clock.run(rig.session.write([{ key: FAN, value: 90 }]));
    const reading = rig.session.readWhole();
    rig.clock.after(300, () => rig.device.restart());
    const read = await rig.clock.run(reading);
    expect(read).toMatchObject({ ok: true, value: { bootCount: 2, activeSlot: 1, committed: true } });
    expect(read.ok && read.value.values).toEqual(rig.device.working);
    await endCleanly(rig);
  });

  it("is given up when it restarts in every read", async () => {
    const rig = await connect();
    // Each pass begins with this question; the settings come after it.
    rig.wireLog.onEntry((entry) => {
      if (entry.direction === "out" && entry.text.startsWith("MEM:COMMITTED?")) rig.clock.after(400, () => rig.device.restart());
    });
    expect(await rig.clock.run(rig.session.readWhole())).toMatchObject({ ok: false, error: { code: "busy" } });
    expect(rig.device.bootCount).toBe(4);
    await rig.clock.advance(10_000);
    await endCleanly(rig);
  });
});

describe("an echoing line", () => {
  it("is borne: a line that repeats the request answers nothing", async () => {
    const rig = await connect();
    const { device, plug } = rig;
    const receive = device.receive.bind(device);
    device.receive = (bytes) => {
      plug.far?.blast(bytes);
      receive(bytes);
    };
    expect(await rig.clock.run(rig.session.write([{ key: HPOS, value: 5 }]))).toEqual({ ok: true, value: { outcome: "acknowledged" } });
    expect(await rig.clock.run(rig.session.read([HPOS]))).toEqual({ ok: true, value: { [HPOS]: 5 } });
    expect(rig.wireLog.entries().filter((entry) => entry.note === "echo")).toHaveLength(2);
    await endCleanly(rig);
  });
});

it("answers the same when a byte comes alone", async () => {
  const rig = await connect();
  rig.plug.setFault(faultAtByte("device-to-host", 3, { kind: "delay", delayMs: 1 }));
  const before = rig.wireLog.exchangeCount;
  expect(await rig.clock.run(rig.session.read([HPOS]))).toEqual({ ok: true, value: { [HPOS]: 0 } });
  expect(rig.wireLog.exchangeCount).toBe(before + 1);
  await endCleanly(rig);
});
