import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { deviceLimits } from "@/lib/serial/limits";
import type { SerialPortLike } from "@/lib/serial/port";
import { openSession } from "@/lib/serial/session/open-session";
import type { DeviceIdentity } from "@/lib/serial/session/types";
import { ApiProblem, isServerAway } from "@/components/ui/api";
import { portFailureOf, portHelp } from "@/components/bench/port-help";
import { EMPTY_BENCH, say, sentenceOf, type BenchCore } from "@/components/bench/store/bench-core";
import { driverOf, firstDriver, type DriverRef } from "@/components/bench/store/drivers";
import { keptRunKey, loadKeptRun, type KeptRun } from "@/components/bench/store/kept-run";
import { readDevice } from "@/components/bench/store/reading";
import { resumeRun, takeUpRun } from "@/components/bench/store/run-control";
import { plugInSimulated, type SimulatedDevice } from "@/components/bench/store/simulated-device";
import type { PlanInput } from "@/lib/serial/plan/types";
import type { JournalEntry } from "@/lib/serial/run/types";

/** The owner's row of this device: found by its serial number, else made. Null without an account. */
async function storedDevice(core: BenchCore, driver: CompiledDriver, identity: DeviceIdentity, isSimulated: boolean) {
  if (!core.around.account) return null;
  const { slug, version } = driver.definition;
  const { maker, model, serialNumber, firmware } = identity;
  const found = serialNumber === undefined ? null : await core.around.server.findDevice(slug, serialNumber);
  const row = found ?? await core.around.server.createDevice({
    name: isSimulated ? `Simulated ${model}` : `${maker} ${model}`, driver: { slug, version }, maker, model, serialNumber, firmware, simulated: isSimulated,
  });
  return row;
}

/** The backup before this visit, so that the next one can say what changed. */
async function lastBackupOf(core: BenchCore, deviceId: string): Promise<void> {
  const last = await core.around.server.lastBackup(deviceId);
  if (!last) return;
  const { content } = await core.around.server.backup(last.id);
  core.store.setState({ backup: { id: last.id, takenAt: Date.parse(last.takenAt), content, changedCount: last.changedValues } });
}

async function keptOnServer(core: BenchCore, deviceId: string): Promise<KeptRun | null> {
  const row = await core.around.server.openRun(deviceId);
  if (!row) return null;
  const plan = await core.around.server.plan(row.planId);
  const identity = core.store.getState().device?.identity;
  // The input was stored by the server after it made the same plan from it; the hash is compared once more here.
  return identity ? { runId: row.id, hash: plan.hash, countdownSeconds: row.countdownSeconds, identity, input: plan.input as PlanInput, entries: [] } : null;
}

/** With a journal of its own this browser goes on while the server is away, and delivers later; without one it cannot. */
function whenAway(here: KeptRun | null): (error: unknown) => null {
  return (error) => {
    if (here !== null && isServerAway(error)) return null;
    throw error;
  };
}

/** Makes this tab the run's holder, and gets its journal. A run that another browser holds now is refused with who has it. */
async function stepsOnServer(core: BenchCore, runId: string, isOurs: boolean): Promise<readonly JournalEntry[]> {
  // A journal in this browser, whose lock no other tab has: the holder before was a tab that is gone.
  await core.around.server.takeHold(runId, core.around.tabId, isOurs).catch((error: unknown) => {
    if (error instanceof ApiProblem && error.problem.code === "held") throw new Error("A run on this device is open in another browser. Go on there, or connect again here once it has been silent for 30 s.", { cause: error });
    throw error;
  });
  return (await core.around.server.steps(runId, -1)).items;
}

/** Looks for a run that was left open, here and at the server, and takes it up. False: there is none. */
async function takeUpOpenRun(core: BenchCore): Promise<boolean> {
  const { device } = core.store.getState();
  if (!device) return false;
  const here = loadKeptRun(core.around.storage, keptRunKey(device.driver.slug, device.identity.serialNumber));
  const there = device.stored ? await keptOnServer(core, device.stored.id).catch(whenAway(here)) : null;
  const kept = here ?? there;
  if (!kept) return false;
  const fromServer = kept.runId !== null && there ? await stepsOnServer(core, kept.runId, here !== null).catch(whenAway(here)) : null;
  return takeUpRun(core, kept, fromServer ?? [], fromServer !== null);
}

/** After the device said who it is: its row, its last backup, an open run, its whole content. */
async function settle(core: BenchCore, identity: DeviceIdentity, isSimulated: boolean): Promise<void> {
  const { line, store } = core;
  if (!line) return;
  const { driver } = line;
  store.setState({
    link: { name: "ready" }, notice: null,
    device: { kind: isSimulated ? "simulated" : "real", driver: driver.definition, limits: deviceLimits(driver.definition, identity.firmware), identity, stored: store.getState().device?.stored ?? null },
  });
  try {
    const row = await storedDevice(core, driver, identity, isSimulated);
    if (row && row.driver.version !== driver.definition.version) return await changeDriver(core, row.driver);
    if (row) {
      store.setState((state) => ({ device: state.device && { ...state.device, stored: { id: row.id, name: row.name, screenId: row.screen?.id ?? null } } }));
      await lastBackupOf(core, row.id);
      if (row.screen) await showScreen(core, row.screen.id);
    }
  } catch (error) {
    say(core, "halt", `The device is connected, but the server can't be asked about it: ${sentenceOf(error)} Backups can't be stored now.`);
  }
  if (!(await takeUpOpenRun(core).catch((error: unknown) => { say(core, "halt", sentenceOf(error)); return false; }))) await readDevice(core);
}

/**
 * Begins again with the version that this device has: its backups and plans are read with that one. The row says the same
 * version as the new line then, so this happens once.
 */
async function changeDriver(core: BenchCore, ref: DriverRef): Promise<void> {
  const { line } = core;
  if (!line) return;
  const driver = await driverOf(core, ref);
  await line.session.close();
  const simulated = line.simulated ? plugInSimulated(driver, core.around.clock, core.around.storage) : null;
  await open(core, driver, simulated?.plug.port ?? line.port, simulated);
}

async function showScreen(core: BenchCore, id: string): Promise<void> {
  const screen = (await core.around.server.screens()).find((one) => one.id === id);
  if (screen) core.store.setState({ screen: { kind: "known", id, envelope: screen.envelope } });
}

async function open(core: BenchCore, driver: CompiledDriver, port: SerialPortLike, simulated: SimulatedDevice | null): Promise<void> {
  const { clock } = core.around;
  const { store } = core;
  const wireLog = core.wireLog;
  store.setState({ link: { name: "opening" } });
  const opened = await openSession({
    port, driver, clock, wireLog,
    // A run that is taken up identifies the device once more: the link is ready then, and stays so.
    onState: (state) => { if (state.name === "identifying" && store.getState().link.name === "opening") store.setState({ link: { name: "identifying" } }); },
  });
  if (!opened.ok) {
    // A run that waits for its device keeps its page: only the link failed again.
    store.setState(core.run ? { link: { name: "lost", cause: portHelp(opened.error, "other").title } } : { ...EMPTY_BENCH, nowMs: clock.wallMs(), screen: store.getState().screen, link: { name: "failed", failure: opened.error } });
    if (!core.run) core.line = null;
    return;
  }
  const { session, identity } = opened.value;
  core.line = { driver, port, session, simulated };
  session.onState((state) => {
    if (core.line?.session === session && state.name === "lost") store.setState({ link: { name: "lost", cause: state.cause }, progress: null });
  });
  if (core.run) {
    store.setState({ link: { name: "ready" }, notice: null });
    await resumeRun(core);
  } else {
    await settle(core, identity, simulated !== null);
  }
}

/** Asks for a port and opens it. Must be called from a click. */
export async function connectReal(core: BenchCore, slug: string): Promise<void> {
  const { serial } = core.around;
  if (!serial || !core.around.account) return;
  try {
    // The port is asked for first: a browser shows its list only right after the click.
    const port = await serial.requestPort();
    await open(core, await firstDriver(core, slug), port, null);
  } catch (error) {
    core.store.setState({ link: { name: "failed", failure: portFailureOf(error) } });
  }
}

export async function connectSimulated(core: BenchCore, slug: string): Promise<void> {
  core.store.setState({ link: { name: "opening" } });
  try {
    const driver = await firstDriver(core, slug);
    const simulated = plugInSimulated(driver, core.around.clock, core.around.storage);
    await open(core, driver, simulated.plug.port, simulated);
  } catch (error) {
    core.store.setState({ link: { name: "failed", failure: { code: "other", detail: sentenceOf(error) } } });
  }
}

/** The port after a replug is a new object: the one granted port is it, else the owner chooses. */
async function portAgain(core: BenchCore, simulated: SimulatedDevice | null): Promise<SerialPortLike | null> {
  if (simulated) return simulated.plug.replug();
  const { serial } = core.around;
  if (!serial) return null;
  const granted = await serial.getPorts();
  const [only] = granted;
  return granted.length === 1 && only ? only : serial.requestPort();
}

/** Connects to the same device again after a loss; an open run is taken up where it was. */
export async function reconnect(core: BenchCore): Promise<void> {
  const { line } = core;
  if (!line) return;
  await line.session.close();
  try {
    const port = await portAgain(core, line.simulated);
    if (port) await open(core, line.driver, port, line.simulated);
  } catch (error) {
    core.store.setState({ link: { name: "lost", cause: portHelp(portFailureOf(error), "other").title } });
  }
}

/** Ends the session. An open run stays in its journal. */
export async function disconnect(core: BenchCore): Promise<void> {
  const { line, run, releaseHold } = core;
  core.line = null;
  core.run = null;
  core.releaseHold = null;
  run?.release();
  releaseHold?.();
  core.store.setState({ ...EMPTY_BENCH, nowMs: core.around.clock.wallMs() });
  await line?.session.close();
}
