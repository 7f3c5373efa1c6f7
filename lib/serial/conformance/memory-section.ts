import type { NativeKey, NativeValue } from "@/lib/serial/native";
import { createWritesFor, filledSlots, probeOf } from "./bench-writes";
import type { Section } from "./section";
import { openBench, type Surroundings, type TestBench } from "./test-bench";

const AFTER_START_MS = 1000;
/** What a device timer is armed for here. */
const TIMER_SECONDS = 5;

type Probe = { readonly key: NativeKey; readonly before: NativeValue; readonly after: NativeValue };
type Act = (bench: TestBench, probe: Probe) => Promise<string | null>;

async function write({ driver, session, device, run }: TestBench, { key, after }: Probe): Promise<string | null> {
  const written = await run(session.write(createWritesFor(driver)(device.working, key, after)));
  return written.ok && written.value.outcome === "acknowledged" ? null : `${key} was not written.`;
}

async function reads({ session, run }: TestBench, key: NativeKey, wanted: NativeValue): Promise<string | null> {
  const read = await run(session.read([key]));
  if (!read.ok) return read.error.message;
  return read.value[key] === wanted ? null : `${key} reads ${String(read.value[key])}, not ${String(wanted)}.`;
}

async function powerCycle({ driver, device, session, clock, run }: TestBench): Promise<string | null> {
  const { bootCount } = device;
  device.powerCycle();
  await clock.advance(driver.definition.boot.takesMs + AFTER_START_MS);
  if (!driver.definition.status.bootCount) return null;
  const count = await run(session.bootCount());
  if (!count.ok) return count.error.message;
  return count.value === bootCount + 1 ? null : `The count of starts reads ${count.value} after start ${bootCount + 1}.`;
}

async function saysCommitted({ driver, session, run }: TestBench, wanted: boolean): Promise<string | null> {
  if (!driver.definition.status.committed) return null;
  const committed = await run(session.committed());
  if (!committed.ok) return committed.error.message;
  return committed.value === wanted ? null : `The device says that ${committed.value ? "all" : "not all"} is stored.`;
}

/** Acts in order; the first problem ends them. */
const inOrder = (...acts: readonly Act[]): Act => async (bench, probe) => {
  for (const act of acts) {
    const problem = await act(bench, probe);
    if (problem !== null) return problem;
  }
  return null;
};
const cycle: Act = (bench) => powerCycle(bench);
const readsOld: Act = (bench, { key, before }) => reads(bench, key, before);
const readsNew: Act = (bench, { key, after }) => reads(bench, key, after);
const commit: Act = async ({ session, run }) => {
  const done = await run(session.commit());
  return done.ok && done.value.outcome === "acknowledged" ? null : done.ok ? "Nobody knows whether it was stored." : done.error.message;
};
const storedOnce: Act = async ({ device }, { key }) => {
  const count = device.counts.stored[key] ?? 0;
  return count === 1 ? null : `It was stored ${count} times.`;
};
const timer = (act: "arm" | "extend" | "confirm" | "disarm", wanted: "done" | "refused"): Act => async ({ session, run }) => {
  const result = await run(session.timer(act, act === "arm" || act === "extend" ? TIMER_SECONDS : undefined));
  if (!result.ok) return result.error.message;
  return result.value === wanted ? null : `To ${act} the timer was ${result.value}, not ${wanted}.`;
};
const wait = (seconds: number): Act => async ({ clock }) => {
  await clock.advance(seconds * 1000);
  return null;
};

const VOLATILE: readonly (readonly [string, Act])[] = [
  ["a write is lost at a power cut", inOrder(write, readsNew, cycle, readsOld)],
  ["what was stored outlasts a power cut", inOrder(write, (bench) => saysCommitted(bench, false), commit, (bench) => saysCommitted(bench, true), storedOnce, cycle, readsNew)],
  ["a store that the device only acknowledges is not taken for one", inOrder(
    write,
    async (bench) => {
      bench.device.setFault((operation) => (operation.kind === "action" && operation.name === "commit" ? { kind: "ignore" } : undefined));
      return commit(bench, { key: "", before: 0, after: 0 });
    },
    (bench) => saysCommitted(bench, false), cycle, readsOld,
  )],
];
const LASTING: readonly (readonly [string, Act])[] = [["a write outlasts a power cut and is stored once", inOrder(write, storedOnce, cycle, readsNew)]];
const TIMED: readonly (readonly [string, Act])[] = [
  ["the device timer puts the old values back", inOrder(timer("arm", "done"), write, readsNew, wait(TIMER_SECONDS + 1), readsOld)],
  ["a timer that was confirmed puts nothing back", inOrder(timer("arm", "done"), write, timer("confirm", "done"), wait(TIMER_SECONDS + 1), readsNew)],
  ["a timer that was extended waits on", inOrder(timer("arm", "done"), write, wait(TIMER_SECONDS - 1), timer("extend", "done"), wait(TIMER_SECONDS - 1), readsNew, wait(2), readsOld)],
  ["a timer that is not armed refuses", inOrder(timer("extend", "refused"), timer("confirm", "refused"), timer("disarm", "refused"))],
  ["a restart ends the timer", inOrder(timer("arm", "done"), cycle, timer("confirm", "refused"))],
];

const MUTES: Act = async ({ session, device, run }) => {
  const on = await run(session.mute(true));
  if (!on.ok || device.rasterOut !== null || !device.muted) return "It still puts something out.";
  const off = await run(session.mute(false));
  return off.ok && !device.muted ? null : "The mute was not lifted.";
};

/** Storing, power cuts, the count of starts, the device timer and the mute, as far as the driver has them. */
export async function judgeMemory(around: Surroundings, section: Section): Promise<void> {
  const { driver } = around;
  const { memory, actions, status } = driver.definition;
  const probe = probeOf(driver);
  if (!probe) return section.judge("a setting to try it on", "No setting can be written, read back, and hold two values.");
  const acts = [...(memory.volatileWrites ? VOLATILE : LASTING), ...(memory.deviceTimer && memory.volatileWrites ? TIMED : []), ...(actions.muteOn ? [["the mute", MUTES] as const] : [])];
  for (const [name, act] of acts) {
    await section.attempt(name, async () => {
      const bench = await openBench(around, { values: { ...filledSlots(driver), [probe.key]: probe.before } });
      if (typeof bench === "string") return bench;
      return (await act(bench, probe)) ?? bench.end();
    });
  }
  if (memory.volatileWrites && !status.committed) section.note("The device cannot say whether all is stored: a store is proved by a power cut only.");
  if (!status.bootCount) section.note("The device does not count its starts: a restart between two reads cannot be told.");
}
