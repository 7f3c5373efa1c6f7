import { describe, expect, it } from "vitest";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { driverDefinitionSchema, type DriverDefinition } from "@/lib/serial/driver/definition";
import { brackenrow4r } from "@/lib/serial/drivers/brackenrow-4r";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { ternwick16 } from "@/lib/serial/drivers/ternwick-16";
import type { NativeKey, NativeValue, NativeWrite } from "@/lib/serial/native";
import type { RequestError, WriteOutcome } from "@/lib/serial/session/types";
import type { Result } from "@/lib/result";
import { anyOf, faultAtByte, type SingleFault, type WireDirection } from "@/lib/serial/simulator/wire-fault";
import { BYTE_FAULTS, type ByteFaultName } from "@/tests/faults/run/byte-faults";
import { SCOPE } from "@/tests/faults/run/sweep";
import { compiled, connect, type Rig } from "@/tests/unit/serial/simulated-rig";

type Scenario = {
  readonly driver: CompiledDriver;
  /** One write request, and the setting of it that is looked at: what it holds before and after. */
  readonly writes: readonly NativeWrite[];
  readonly key: NativeKey;
  readonly before: number;
  readonly after: number;
  /** A setting whose reply is as long as the first one's, with another value. */
  readonly twin: NativeKey;
  readonly twinValue: number;
};

/** The same wire, less of it: two slots, two modes, the settings that are named. */
function shrink(definition: DriverDefinition, wanted: (key: string) => boolean): CompiledDriver {
  const inside = (key: string) => !/\[(?:[3-9]|\d\d)\]/u.test(key);
  const settings = definition.settings.filter(({ key }) => wanted(key) || key.startsWith("modes[*].timing") || key === "slots[*].mode");
  const kept = new Set(settings.map(({ key }) => key));
  const factory = Object.fromEntries(Object.entries(definition.factory).filter(([key]) => inside(key) && kept.has(key.replace(/\[\d+\]/u, "[*]"))));
  return compiled(driverDefinitionSchema.parse({ ...definition, slots: { ...definition.slots, count: 2 }, modes: { first: 1, count: 2 }, settings, factory }));
}

const trims = ["leftPx", "rightPx", "topLines", "bottomLines"].map((side) => `everywhere.trim.${side}`);
const SCENARIOS: Readonly<Record<string, Scenario>> = {
  text: {
    driver: shrink(lanternfieldLf8, (key) => key.startsWith("native.")), writes: [{ key: "native.fanPct", value: 60 }], key: "native.fanPct", before: 40, after: 60,
    twin: "native.panelLight", twinValue: 6,
  },
  "modbus-rtu": {
    driver: shrink(brackenrow4r, (key) => key.startsWith("native.")), writes: [{ key: "native.outputGain", value: 10 }], key: "native.outputGain", before: 0, after: 10,
    twin: "modes[1].timing.vertical.active", twinValue: 240,
  },
  packet: {
    driver: shrink(ternwick16, (key) => key.startsWith("everywhere.trim") || key.startsWith("slots[*].")), writes: trims.map((key) => ({ key, value: 5 })), key: "everywhere.trim.leftPx", before: 0, after: 5,
    twin: "modes[1].timing.vertical.active", twinValue: 240,
  },
};

type Values = Result<Readonly<Record<string, NativeValue>>, RequestError>;
type Told = {
  readonly before: Values;
  readonly written: Result<WriteOutcome, RequestError>;
  readonly readBack: Values;
  readonly twin: Values;
  readonly recalled: Result<WriteOutcome, RequestError>;
  readonly committed: Result<WriteOutcome, RequestError>;
};

/** A read, one write with its read-back, a read as long, one recall, one commit: what a run is made of. */
async function transact({ session }: Rig, { writes, key, twin }: Scenario, signal: AbortSignal): Promise<Told> {
  const before = await session.read([key], signal);
  const written = await session.write(writes, signal);
  const readBack = await session.read([key], signal);
  return { before, written, readBack, twin: await session.read([twin], signal), recalled: await session.recall(2, signal), committed: await session.commit(signal) };
}

/** The one setting that was asked for, with this value. */
const holdsOnly = (values: Readonly<Record<string, NativeValue>>, key: NativeKey, value: NativeValue | undefined) => Object.keys(values).length === 1 && values[key] === value;

const acknowledged = (result: Result<WriteOutcome, RequestError>) => result.ok && result.value.outcome === "acknowledged";

/**
 * What must hold whatever the line does (the first number is the invariant's): 1 everything settles (the clock would say otherwise),
 * 2 "acknowledged" only for what the device did, 3 no wrong value is read, 4 and 5 the line works again or counts as lost and nothing
 * is left behind, 7 recall and commit leave once, 8 non-volatile memory is written once at most.
 */
async function check(rig: Rig, told: Told, { key, before, after, twin, twinValue }: Scenario): Promise<void> {
  const { device, clock, session } = rig;
  const { counts, bootCount } = device;
  const restarted = bootCount > 1;
  const wrong: unknown[] = [];
  const demand = (truth: boolean, what: string, found: unknown) => {
    if (!truth) wrong.push({ [what]: found });
  };
  demand(!acknowledged(told.written) || counts.writesByKey[key] === 1, "acknowledged writes", counts.writesByKey);
  demand(!told.before.ok || holdsOnly(told.before.value, key, before), "read before", told.before);
  demand(!told.readBack.ok || restarted || holdsOnly(told.readBack.value, key, device.working[key]), "read back", told.readBack);
  demand(!told.readBack.ok || !restarted || [before, after].includes(Number(told.readBack.value[key])), "read back after a restart", told.readBack);
  demand(!told.twin.ok || holdsOnly(told.twin.value, twin, twinValue), "read of the twin", told.twin);
  demand(!acknowledged(told.recalled) || counts.recalls === 1, "acknowledged recalls", counts.recalls);
  demand(!acknowledged(told.committed) || counts.commits === 1, "acknowledged commits", counts.commits);
  demand([counts.recalls, counts.commits, counts.writes, ...Object.values(counts.stored)].every((count) => count <= 1), "done more than once", counts);
  rig.plug.setFault(null);
  rig.plug.release();
  if (session.state.name === "ready") {
    await clock.advance(3000);
    const again = await clock.run(session.read([key]));
    demand(again.ok && holdsOnly(again.value, key, device.working[key]), "read afterwards", again);
  } else demand(session.state.name === "lost", "state afterwards", session.state.name);
  await clock.run(session.close());
  await clock.advance(1000);
  demand(clock.pendingTimers() === 0, "timers left", clock.pendingTimers());
  // One look at all of it: tens of thousands of single ones take longer than the cases.
  if (wrong.length > 0) expect(wrong).toEqual([]);
}

/** What strikes: a fault of the line, or the caller who calls everything off at that byte. */
type Strike = ByteFaultName | "abort";
type ShortCase = { readonly protocol: string; readonly direction: WireDirection; readonly at: number; readonly strikes: readonly Strike[]; readonly apart: number };

const idOf = ({ protocol, direction, at, strikes, apart }: ShortCase) => `short/${protocol}/${direction}/${strikes.join("+")}@${at}/${apart}`;

function parseShort(id: string): ShortCase {
  const [, protocol, direction, what, at, apart] = /^short\/([a-z-]+)\/(host-to-device|device-to-host)\/([a-z0-9+-]+)@(\d+)\/(\d+)$/u.exec(id) ?? [];
  if (protocol === undefined || what === undefined) throw new Error(`${id} is no name of a short transaction's case`);
  // What is no name of a fault is found out below, where it is looked up.
  return { protocol, direction: direction === "host-to-device" ? direction : "device-to-host", at: Number(at), strikes: what.split("+") as Strike[], apart: Number(apart) };
}

function strikeAt(strike: Strike, direction: WireDirection, at: number, abort: () => void): SingleFault {
  if (strike !== "abort") return faultAtByte(direction, at, BYTE_FAULTS[strike]);
  let fired = false;
  return {
    get fired() {
      return fired;
    },
    onByte(_byte, index, way) {
      if (!fired && way === direction && index === at) {
        fired = true;
        abort();
      }
      return { kind: "pass" };
    },
  };
}

let lived = 0;

/** Runs the transaction with its faults from byte `at` on. @returns whether all of them struck */
async function runCase(one: ShortCase): Promise<boolean> {
  const scenario = SCENARIOS[one.protocol];
  if (!scenario) throw new Error(`no scenario ${one.protocol}`);
  const rig = await connect(scenario.driver, {}, "none");
  const { hostToDeviceBytes, deviceToHostBytes } = rig.plug.counts;
  const from = one.direction === "host-to-device" ? hostToDeviceBytes : deviceToHostBytes;
  const calledOff = new AbortController();
  const single = one.strikes.map((strike, index) => strikeAt(strike, one.direction, from + one.at + index * one.apart, () => calledOff.abort()));
  rig.plug.setFault(anyOf(single));
  try {
    await check(rig, await rig.clock.run(transact(rig, scenario, calledOff.signal)), scenario);
  } catch (error) {
    throw new Error(`SWEEP=${idOf(one)}: ${error instanceof Error ? error.message : String(error)}`, { cause: error });
  }
  lived += 1;
  return single.every((fault) => fault.fired);
}

/** Faults within one transaction's bytes; the sweep ends by itself at the first byte that is not reached. */
const MOST_BYTES = 2000;
/** A busy machine is slow; nothing here measures time. */
const PATIENCE_MS = 3_600_000;
const STRIKES: readonly Strike[] = [...(Object.keys(BYTE_FAULTS) as ByteFaultName[]).filter((name) => !["unplug-event", "unplug-unknown", "overrun", "framing"].includes(name)), "abort"];
const DIRECTIONS = ["host-to-device", "device-to-host"] as const;
/** In a cover, the faults of one kind share the bytes among them: eight bits to flip, three bytes to put in, three delays. */
function strideOf(strike: Strike): number {
  if (SCOPE === "whole") return 1;
  if (strike.startsWith("flip")) return 4;
  return strike.startsWith("insert") || strike.startsWith("delay") ? 3 : 1;
}

describe.each(Object.keys(SCENARIOS))("a fault on the line, %s", (protocol) => {
  describe.each(DIRECTIONS)("%s", (direction) => {
    it.each(STRIKES)("leaves no false word, at whichever byte: %s", { timeout: PATIENCE_MS }, async (strike) => {
      const stride = strideOf(strike);
      let at = STRIKES.indexOf(strike) % stride;
      let cases = 0;
      for (; at < MOST_BYTES && (await runCase({ protocol, direction, at, strikes: [strike], apart: 0 })); at += stride) cases += 1;
      expect(cases * stride).toBeGreaterThan(40);
      expect(at).toBeLessThan(MOST_BYTES);
    });
  });

  it("leaves no false word when two come", { timeout: PATIENCE_MS }, async () => {
    const kinds: readonly Strike[] = ["drop", "flip2", "duplicate", "delay-200", "delay-700", "restart"];
    let cases = 0;
    for (const [index, first] of kinds.entries()) {
      for (const [other, second] of kinds.entries()) {
        for (const apart of SCOPE === "whole" ? [1, 2, 3, 5, 7, 11, 23, 41] : [1, 7, 23]) {
          const stride = SCOPE === "whole" ? 1 : 23;
          for (const direction of DIRECTIONS) {
            for (let at = SCOPE === "whole" ? 0 : (3 * index + other) % stride; await runCase({ protocol, direction, at, strikes: [first, second], apart }); at += stride) cases += 1;
          }
        }
      }
    }
    expect(cases).toBeGreaterThan(100);
  });
});

it("has lived through 8 000 cases at least", () => {
  expect(lived).toBeGreaterThanOrEqual(8000);
});

/** Cases that once went wrong, or were near to it, and the one that `SWEEP` names. */
const KEPT = ["short/text/device-to-host/delay-700@20/0", "short/modbus-rtu/device-to-host/duplicate@6/0", "short/packet/host-to-device/drop+drop@12/7"];
const NAMED = process.env.SWEEP?.startsWith("short/") ? [process.env.SWEEP] : [];

it.each([...KEPT, ...NAMED])("repeats the case %s", async (id) => {
  expect(idOf(parseShort(id))).toBe(id);
  expect(await runCase(parseShort(id))).toBe(true);
});
