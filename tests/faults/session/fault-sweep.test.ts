import { describe, expect, it } from "vitest";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { driverDefinitionSchema, type DriverDefinition } from "@/lib/serial/driver/definition";
import { brackenrow4r } from "@/lib/serial/drivers/brackenrow-4r";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { ternwick16 } from "@/lib/serial/drivers/ternwick-16";
import type { NativeKey, NativeValue, NativeWrite } from "@/lib/serial/native";
import type { RequestError, WriteOutcome } from "@/lib/serial/session/types";
import type { Result } from "@/lib/result";
import { anyOf, faultAtByte, type ByteFault, type WireDirection } from "@/lib/serial/simulator/wire-fault";
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
async function transact({ session }: Rig, { writes, key, twin }: Scenario): Promise<Told> {
  const before = await session.read([key]);
  const written = await session.write(writes);
  const readBack = await session.read([key]);
  return { before, written, readBack, twin: await session.read([twin]), recalled: await session.recall(2), committed: await session.commit() };
}

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
  if (acknowledged(told.written)) expect(counts.writesByKey[key]).toBe(1);
  if (told.before.ok) expect(told.before.value).toEqual({ [key]: before });
  if (told.readBack.ok && !restarted) expect(told.readBack.value).toEqual({ [key]: device.working[key] });
  if (told.readBack.ok && restarted) expect([before, after]).toContain(told.readBack.value[key]);
  if (told.twin.ok) expect(told.twin.value).toEqual({ [twin]: twinValue });
  if (acknowledged(told.recalled)) expect(counts.recalls).toBe(1);
  if (acknowledged(told.committed)) expect(counts.commits).toBe(1);
  for (const count of [counts.recalls, counts.commits, counts.writes, ...Object.values(counts.stored)]) expect(count).toBeLessThanOrEqual(1);
  rig.plug.setFault(null);
  rig.plug.release();
  if (session.state.name === "ready") {
    await clock.advance(3000);
    expect(await clock.run(session.read([key]))).toEqual({ ok: true, value: { [key]: device.working[key] } });
  } else expect(session.state.name).toBe("lost");
  await clock.run(session.close());
  await clock.advance(1000);
  expect(clock.pendingTimers()).toBe(0);
}

/** Runs the transaction with a fault at byte n. @returns whether the fault struck */
async function runCase(name: string, direction: WireDirection, n: number, faults: readonly ByteFault[], second = 0): Promise<boolean> {
  const scenario = SCENARIOS[name];
  if (!scenario) throw new Error(`no scenario ${name}`);
  const rig = await connect(scenario.driver);
  const { hostToDeviceBytes, deviceToHostBytes } = rig.plug.counts;
  const from = direction === "host-to-device" ? hostToDeviceBytes : deviceToHostBytes;
  const single = faults.map((fault, index) => faultAtByte(direction, from + n + index * second, fault));
  rig.plug.setFault(anyOf(single));
  try {
    await check(rig, await rig.clock.run(transact(rig, scenario)), scenario);
  } catch (error) {
    throw new Error(`${name} ${direction} byte ${n} ${JSON.stringify(faults)}: ${error instanceof Error ? error.message : String(error)}`, { cause: error });
  }
  return single.every((fault) => fault.fired);
}

const FAULTS: readonly ByteFault[] = [
  { kind: "drop" }, { kind: "flip", mask: 0x01 }, { kind: "flip", mask: 0x10 }, { kind: "insert", byte: 0x0a }, { kind: "duplicate" },
  { kind: "delay", delayMs: 40 }, { kind: "delay", delayMs: 320 }, { kind: "delay", delayMs: 900 }, { kind: "stall" }, { kind: "restart" },
  { kind: "unplug", order: "stream-first" }, { kind: "read-error", fault: "parity" },
];

/** What the binary protocols get of it: the rest of the session is the same code. */
const FAULTS_OF: Readonly<Record<string, readonly ByteFault[]>> = {
  text: FAULTS,
  "modbus-rtu": FAULTS.filter((fault) => fault.kind === "drop" || fault.kind === "duplicate" || (fault.kind === "delay" && fault.delayMs > 100)),
  packet: FAULTS.filter((fault) => fault.kind === "drop" || (fault.kind === "flip" && fault.mask === 1) || (fault.kind === "delay" && fault.delayMs === 320)),
};

/** Faults within one transaction's bytes; the sweep ends by itself at the first byte that is not reached. */
const MOST_BYTES = 2000;

const DIRECTIONS = ["host-to-device", "device-to-host"] as const;

describe.each(Object.keys(SCENARIOS))("a fault on the line, %s", (name) => {
  describe.each(DIRECTIONS)("%s", (direction) => {
    it.each((FAULTS_OF[name] ?? []).map((fault) => [JSON.stringify(fault), fault] as const))("leaves no false word, at whichever byte: %s", { timeout: 300_000 }, async (_id, fault) => {
      let n = 0;
      while (n < MOST_BYTES && (await runCase(name, direction, n, [fault]))) n += 1;
      expect(n).toBeGreaterThan(40);
      expect(n).toBeLessThan(MOST_BYTES);
    });
  });

  it("leaves no false word when two come", { timeout: 300_000 }, async () => {
    const pairs: readonly (readonly [ByteFault, ByteFault])[] = [
      [{ kind: "drop" }, { kind: "drop" }], [{ kind: "flip", mask: 4 }, { kind: "flip", mask: 4 }], [{ kind: "delay", delayMs: 320 }, { kind: "restart" }],
    ];
    let cases = 0;
    for (const pair of pairs) {
      for (const apart of [1, 7, 23]) {
        for (let n = 0; await runCase(name, "device-to-host", n, pair, apart); n += 5) cases += 1;
      }
    }
    expect(cases).toBeGreaterThan(30);
  });
});
