import { describe, expect, it } from "vitest";
import { driverDefinitionSchema } from "@/lib/serial/driver/definition";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import type { NativeValue } from "@/lib/serial/native";
import type { RequestError, WriteOutcome } from "@/lib/serial/session/types";
import type { Result } from "@/lib/result";
import { anyOf, faultAtByte, type ByteFault, type WireDirection } from "@/lib/serial/simulator/wire-fault";
import { compiled, connect, type Rig } from "@/tests/unit/serial/simulated-rig";

/** The LF-8 with two slots, two modes and a few settings: the same wire, less of it. */
const small = compiled(
  driverDefinitionSchema.parse({
    ...lanternfieldLf8, slots: { ...lanternfieldLf8.slots, count: 2 }, modes: { first: 1, count: 2 },
    settings: lanternfieldLf8.settings.filter(({ key }) => ["native.fanPct", "slots[*].name", "slots[*].mode"].includes(key) || key.startsWith("modes[*].timing")),
    factory: Object.fromEntries(Object.entries(lanternfieldLf8.factory).filter(([key]) => /^(?:slots\[[12]\]\.(?:name|mode)$|modes\[[12]\]\.timing)/u.test(key))),
  }),
);
const FAN = "native.fanPct";

type Told = {
  readonly written: Result<WriteOutcome, RequestError>;
  readonly readBack: Result<Readonly<Record<string, NativeValue>>, RequestError>;
  readonly recalled: Result<WriteOutcome, RequestError>;
  readonly committed: Result<WriteOutcome, RequestError>;
};

/** One write with its read-back, one recall, one commit: what a run is made of. */
async function transact({ session }: Rig): Promise<Told> {
  const written = await session.write([{ key: FAN, value: 60 }]);
  const readBack = await session.read([FAN, "slots[1].name"]);
  const recalled = await session.recall(2);
  return { written, readBack, recalled, committed: await session.commit() };
}

const acknowledged = (result: Result<WriteOutcome, RequestError>) => result.ok && result.value.outcome === "acknowledged";

/**
 * What must hold whatever the line does (the first number is the invariant's): 1 everything settles (the clock would say otherwise),
 * 2 "acknowledged" only for what the device did, 3 no wrong value is read, 4 and 5 the line works again or counts as lost and nothing
 * is left behind, 7 recall and commit leave once, 8 non-volatile memory is written once at most.
 */
async function check(rig: Rig, told: Told): Promise<void> {
  const { device, clock, session } = rig;
  const { counts, bootCount } = device;
  const restarted = bootCount > 1;
  if (acknowledged(told.written)) expect(counts.writesByKey[FAN]).toBe(1);
  if (told.readBack.ok && !restarted) expect(told.readBack.value).toEqual({ [FAN]: device.working[FAN], "slots[1].name": "240 lines 60 Hz" });
  if (told.readBack.ok && restarted) expect([40, 60]).toContain(told.readBack.value[FAN]);
  if (acknowledged(told.recalled)) expect(counts.recalls).toBe(1);
  if (acknowledged(told.committed)) expect(counts.commits).toBe(1);
  expect(counts.recalls).toBeLessThanOrEqual(1);
  expect(counts.commits).toBeLessThanOrEqual(1);
  expect(counts.writes).toBeLessThanOrEqual(1);
  expect(Math.max(0, ...Object.values(counts.stored))).toBeLessThanOrEqual(1);
  for (const word of ["SLOT", "*RCL ", "MEM:COMMIT*", "SYST:FAN "]) {
    const limit = word === "SLOT" ? Infinity : 1;
    expect(rig.wireLog.entries().filter((entry) => entry.direction === "out" && entry.text.startsWith(word)).length).toBeLessThanOrEqual(limit);
  }
  rig.plug.setFault(null);
  rig.plug.release();
  if (session.state.name === "ready") {
    await clock.advance(2000);
    expect(await clock.run(session.read([FAN]))).toEqual({ ok: true, value: { [FAN]: device.working[FAN] } });
  } else expect(session.state.name).toBe("lost");
  await clock.run(session.close());
  await clock.advance(1000);
  expect(clock.pendingTimers()).toBe(0);
}

/** Runs the transaction with a fault at byte n. @returns whether the fault struck */
async function runCase(direction: WireDirection, n: number, faults: readonly ByteFault[], second = 0): Promise<boolean> {
  const rig = await connect(small);
  const { hostToDeviceBytes, deviceToHostBytes } = rig.plug.counts;
  const from = direction === "host-to-device" ? hostToDeviceBytes : deviceToHostBytes;
  const single = faults.map((fault, index) => faultAtByte(direction, from + n + index * second, fault));
  rig.plug.setFault(anyOf(single));
  try {
    await check(rig, await rig.clock.run(transact(rig)));
  } catch (error) {
    throw new Error(`${direction} byte ${n} ${JSON.stringify(faults)}: ${error instanceof Error ? error.message : String(error)}`, { cause: error });
  }
  return single.every((fault) => fault.fired);
}

const FAULTS: readonly ByteFault[] = [
  { kind: "drop" }, { kind: "flip", mask: 0x01 }, { kind: "flip", mask: 0x10 }, { kind: "insert", byte: 0x0a }, { kind: "duplicate" },
  { kind: "delay", delayMs: 40 }, { kind: "delay", delayMs: 320 }, { kind: "delay", delayMs: 900 }, { kind: "stall" }, { kind: "restart" },
  { kind: "unplug", order: "stream-first" }, { kind: "read-error", fault: "parity" },
];

/** Faults within one transaction's bytes; the sweep ends by itself at the first byte that is not reached. */
const MOST_BYTES = 2000;

describe.each(["host-to-device", "device-to-host"] as const)("a fault on the line, %s", (direction) => {
  it.each(FAULTS)("leaves no false word, at whichever byte: $kind $mask$byte$delayMs", { timeout: 120_000 }, async (fault) => {
    let n = 0;
    while (n < MOST_BYTES && (await runCase(direction, n, [fault]))) n += 1;
    expect(n).toBeGreaterThan(60);
    expect(n).toBeLessThan(MOST_BYTES);
  });
});

describe("two faults", () => {
  it("leave no false word either", { timeout: 120_000 }, async () => {
    const pairs: readonly (readonly [ByteFault, ByteFault])[] = [
      [{ kind: "drop" }, { kind: "drop" }], [{ kind: "flip", mask: 4 }, { kind: "flip", mask: 4 }], [{ kind: "delay", delayMs: 320 }, { kind: "restart" }],
    ];
    let cases = 0;
    for (const pair of pairs) {
      for (const apart of [1, 7, 23]) {
        for (let n = 0; await runCase("device-to-host", n, pair, apart); n += 5) cases += 1;
      }
    }
    expect(cases).toBeGreaterThan(60);
  });
});
