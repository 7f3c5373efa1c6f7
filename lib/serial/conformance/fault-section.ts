import type { Result } from "@/lib/result";
import type { NativeKey, NativeValue, NativeValues } from "@/lib/serial/native";
import type { RequestError, WriteOutcome } from "@/lib/serial/session/types";
import type { DeviceOperation, OperationFault } from "@/lib/serial/simulator/device-operations";
import { faultAtByte, type ByteFault, type WireDirection, type WireFault } from "@/lib/serial/simulator/wire-fault";
import { createWritesFor, filledSlots, probeOf } from "./bench-writes";
import type { Section } from "./section";
import { openBench, type Surroundings, type TestBench } from "./test-bench";
import { evenly } from "./values-to-try";

type Probe = { readonly key: NativeKey; readonly before: NativeValue; readonly after: NativeValue };
type Outcome = Result<WriteOutcome, RequestError>;
type Told = { readonly before: Result<NativeValues, RequestError>; readonly written: Outcome; readonly readBack: Result<NativeValues, RequestError>; readonly recalled: Outcome | null; readonly committed: Outcome | null };

const DIRECTIONS: readonly WireDirection[] = ["host-to-device", "device-to-host"];
/** A driver with more settings takes so long for each device that fewer places are tried. */
const MANY_SETTINGS = 2000;

/** A read, a write with its read-back, a recall, a store: what a run is made of, each once. */
async function transact({ driver, session, device, run }: TestBench, { key, after }: Probe): Promise<Told> {
  const { actions, slots } = driver.definition;
  const before = await run(session.read([key]));
  const written = await run(session.write(createWritesFor(driver)(device.working, key, after)));
  const readBack = await run(session.read([key]));
  const recalled = actions.recall ? await run(session.recall(slots.first)) : null;
  return { before, written, readBack, recalled, committed: actions.commit ? await run(session.commit()) : null };
}

const acknowledged = (outcome: Outcome | null) => outcome?.ok === true && outcome.value.outcome === "acknowledged";

/** What must hold whatever happened. @param claimsValues the line has a check, so no wrong value may be read */
function wrongOf({ device }: TestBench, told: Told, { key, before, after }: Probe, claimsValues: boolean): string | null {
  const { counts, bootCount } = device;
  if (acknowledged(told.written) && counts.writesByKey[key] !== 1) return `The write counts as acknowledged, and the device did it ${counts.writesByKey[key] ?? 0} times.`;
  if (claimsValues && told.before.ok && told.before.value[key] !== before) return `${key} was read as ${String(told.before.value[key])} before it was written.`;
  const allowed = bootCount > 1 ? [before, after, device.working[key]] : [device.working[key]];
  if (claimsValues && told.readBack.ok && !allowed.includes(told.readBack.value[key] ?? "")) return `${key} was read back as ${String(told.readBack.value[key])}, and the device holds ${String(device.working[key])}.`;
  if (acknowledged(told.recalled) && counts.recalls !== 1) return `The recall counts as acknowledged, and the device did it ${counts.recalls} times.`;
  if (acknowledged(told.committed) && counts.commits !== 1) return `The store counts as acknowledged, and the device did it ${counts.commits} times.`;
  if (counts.recalls > 1 || counts.commits > 1 || counts.writes > 1) return "Something that must leave once was done twice.";
  return Object.values(counts.stored).some((times) => times > 1) ? "Non-volatile memory was written twice." : null;
}

/** After the fault the line works again, or the session counts as lost. */
async function afterwards({ session, clock, driver, plug, device, run }: TestBench, { key }: Probe): Promise<string | null> {
  plug.setFault(null);
  plug.release();
  device.setFault(null);
  await clock.advance(driver.definition.boot.takesMs + driver.definition.pace.replyTimeoutMs + 3000);
  if (session.state.name !== "ready") return session.state.name === "lost" ? null : `The session is ${session.state.name}.`;
  const read = await run(session.read([key]));
  if (!read.ok) return `The line does not work again: ${read.error.message}`;
  return read.value[key] === device.working[key] ? null : `${key} is read as ${String(read.value[key])} on a quiet line.`;
}

type Surprise = { readonly wire?: WireFault; readonly device?: (operation: DeviceOperation) => OperationFault | undefined };

async function runCase(around: Surroundings, probe: Probe, claimsValues: boolean, surprise: (bench: TestBench) => Surprise): Promise<string | null> {
  const bench = await openBench(around, { values: { ...filledSlots(around.driver), [probe.key]: probe.before } });
  if (typeof bench === "string") return bench;
  const { wire, device } = surprise(bench);
  bench.plug.setFault(wire ?? null);
  bench.device.setFault(device ?? null);
  const told = await transact(bench, probe);
  return wrongOf(bench, told, probe, claimsValues) ?? (await afterwards(bench, probe)) ?? bench.end();
}

function byteFaults(replyTimeoutMs: number): readonly (readonly [string, ByteFault])[] {
  return [
    ["a byte is lost", { kind: "drop" }], ["a bit is flipped", { kind: "flip", mask: 0x01 }], ["another bit is flipped", { kind: "flip", mask: 0x10 }],
    ["a byte is inserted", { kind: "insert", byte: 0x0a }], ["a byte is doubled", { kind: "duplicate" }],
    ["a byte comes later", { kind: "delay", delayMs: replyTimeoutMs / 8 }], ["a byte comes too late", { kind: "delay", delayMs: replyTimeoutMs * 1.2 }],
    ["the line stalls", { kind: "stall" }], ["the plug is pulled", { kind: "unplug" }], ["the device restarts", { kind: "restart" }],
    ["a parity error", { kind: "read-error", fault: "parity" }], ["writing fails", { kind: "write-error" }],
  ];
}

/** Words that nobody asked for stand before one byte. */
function unaskedAt(index: number, words: Uint8Array): WireFault {
  return { onByte: (byte, at, way) => (way === "device-to-host" && at === index ? { kind: "replace", bytes: [...words, byte] } : { kind: "pass" }) };
}

const OPERATION_FAULTS: readonly (readonly [string, DeviceOperation["kind"], OperationFault])[] = [
  ["a write is acknowledged and not done", "write", { kind: "ignore" }], ["another value is stored", "write", { kind: "store-other" }],
  ["half a write is stored", "write", { kind: "torn", stored: 0 }], ["a write meets a busy device", "write", { kind: "busy" }],
  ["a write is refused", "write", { kind: "refuse" }], ["a write is done in silence", "write", { kind: "silent" }],
  ["a read meets a busy device", "read", { kind: "busy" }], ["a read is refused", "read", { kind: "refuse" }], ["a read is not answered", "read", { kind: "silent" }],
  ["an order meets a busy device", "action", { kind: "busy" }], ["an order is refused", "action", { kind: "refuse" }],
  ["an order is done in silence", "action", { kind: "silent" }], ["a store is acknowledged and not done", "action", { kind: "ignore" }],
];

/** How many bytes the transaction takes each way, from where. */
async function measure(around: Surroundings, probe: Probe): Promise<Readonly<Record<WireDirection, number>> | string> {
  const bench = await openBench(around, { values: { ...filledSlots(around.driver), [probe.key]: probe.before } });
  if (typeof bench === "string") return bench;
  const from = bench.plug.counts;
  const told = await transact(bench, probe);
  const { hostToDeviceBytes, deviceToHostBytes } = bench.plug.counts;
  const problem = wrongOf(bench, told, probe, true) ?? (acknowledged(told.written) ? await bench.end() : "The write was not acknowledged on a quiet line.");
  return problem ?? { "host-to-device": hostToDeviceBytes - from.hostToDeviceBytes, "device-to-host": deviceToHostBytes - from.deviceToHostBytes };
}

/** Every kind of fault at a few places of a transaction, both ways, and every way in which the device itself can go wrong. */
export async function judgeFaults(around: Surroundings, section: Section): Promise<void> {
  const { driver, bounds } = around;
  const { protocol, pace, boot } = driver.definition;
  const probe = probeOf(driver);
  if (!probe) return section.judge("a setting to try it on", "No setting can be written, read back, and hold two values.");
  const claimsValues = protocol.kind !== "text" || (protocol.check?.requiredInReplies ?? false);
  const lengths = await measure(around, probe);
  section.judge("without a fault", typeof lengths === "string" ? lengths : null);
  if (typeof lengths === "string") return;
  const places = driver.settings.length > MANY_SETTINGS ? 2 : bounds.faultPlaces;
  for (const direction of DIRECTIONS) {
    const bytes = evenly(Array.from({ length: lengths[direction] }, (_, index) => index), places);
    for (const [name, fault] of byteFaults(pace.replyTimeoutMs)) {
      for (const byte of bytes) {
        await section.attempt(`${name}, ${direction}, byte ${byte}`, () =>
          runCase(around, probe, claimsValues, ({ plug }) => ({ wire: faultAtByte(direction, (direction === "host-to-device" ? plug.counts.hostToDeviceBytes : plug.counts.deviceToHostBytes) + byte, fault) })));
      }
    }
    if (direction === "host-to-device") continue;
    const words = new TextEncoder().encode(`${boot.chatter[0] ?? "ready"}${protocol.kind === "text" ? protocol.lineEnd : ""}`);
    for (const byte of bytes) await section.attempt(`unasked words, byte ${byte}`, () => runCase(around, probe, claimsValues, ({ plug }) => ({ wire: unaskedAt(plug.counts.deviceToHostBytes + byte, words) })));
  }
  for (const [name, kind, fault] of OPERATION_FAULTS) {
    await section.attempt(name, () => runCase(around, probe, claimsValues, () => ({ device: (operation) => (operation.kind === kind ? fault : undefined) })));
  }
}
