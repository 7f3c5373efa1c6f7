import { takeBackup } from "@/lib/serial/backup/take-backup";
import type { TakenBackup } from "@/lib/serial/backup/types";
import type { Clock } from "@/lib/serial/clock";
import { createVirtualClock, type VirtualClock } from "@/lib/serial/clock/virtual-clock";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { ActionName } from "@/lib/serial/driver/definition";
import { toNative } from "@/lib/serial/driver/neutral";
import type { NativeValue, NativeValues } from "@/lib/serial/native";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";
import type { CheckedPlan } from "@/lib/serial/plan/types";
import { createAlignment, createRun, restoreAlignment, restoreRun, type AlignmentSetup, type Run } from "@/lib/serial/run/create-run";
import type { OwnerWord } from "@/lib/serial/run/types";
import { openSession } from "@/lib/serial/session/open-session";
import type { DeviceIdentity, DeviceSession, OpenFailure } from "@/lib/serial/session/types";
import { createDeviceModel, type SimulatedDevice } from "@/lib/serial/simulator/device-model";
import type { OperationFault } from "@/lib/serial/simulator/device-operations";
import { createSimulatedDevicePort, type SimulatedDevicePort } from "@/lib/serial/simulator/simulated-device-port";
import { anyOf } from "@/lib/serial/simulator/wire-fault";
import { createWireLog, hexOf, type WireEntry } from "@/lib/serial/wire-log";
import type { Result } from "@/lib/result";
import { backupOf, planned, profileOf, rasterOf, television } from "@/tests/unit/serial/plan/plan-fixtures";
import { ByteLine, type ByteTrouble } from "./byte-faults";
import { FAULT_DEVICES, type DeviceName } from "./drivers";
import { FaultLine, type DeviceFault, type Fault } from "./fault-line";
import { twoJournals, type TwoJournals } from "./two-journals";

/** A timer of the device that is this long is the one that puts values back: work and starts take less. */
const DEVICE_TIMER_MS = 5_000;
/** A hidden tab's timers are drawn together to whole seconds. Source: HTML and browsers' timer throttling. */
const HIDDEN_TICK_MS = 1000;

/** The device's own time: like the page's, but its long timer fires when the test says so, and never by itself. */
function deviceClock(clock: Clock): { readonly clock: Clock; fireTimer(): void } {
  let held: (() => void) | null = null;
  return {
    clock: {
      ...clock,
      after(ms, fire) {
        if (ms < DEVICE_TIMER_MS) return clock.after(ms, fire);
        held = fire;
        return () => {
          if (held === fire) held = null;
        };
      },
    },
    fireTimer() {
      const fire = held;
      held = null;
      fire?.();
    },
  };
}

/** Time as a page in a hidden tab has it. */
function hiddenClock(clock: Clock): Clock {
  return { ...clock, after: (ms, fire) => clock.after(Math.ceil((clock.nowMs() + ms) / HIDDEN_TICK_MS) * HIDDEN_TICK_MS - clock.nowMs(), fire) };
}

export type WorldOptions = {
  readonly device: DeviceName;
  readonly faults: readonly Fault[];
  readonly bytes: readonly ByteTrouble[];
  /** The slot that a restart puts on. */
  readonly powerOnSlot: 1 | 2;
  /** A change by hand that was never committed: non-volatile memory differs from the start. */
  readonly dirty: boolean;
  readonly hidden: boolean;
  /**
   * How the plan changes the raster that is out: 1 in one write, in one block or at a recall, as the device does it; 3 and 5,
   * where each number takes effect at once, in many writes, meanwhile with another slot on, or muted.
   */
  readonly way: 1 | 3 | 5;
  /** `by-hand`: the run has no plan and is opened for live alignment. */
  readonly scenario?: string;
};

/** One device, one page and one owner, with what may go wrong between them. */
export type World = {
  readonly clock: VirtualClock;
  /** The page's own time. */
  readonly pageClock: Clock;
  readonly driver: CompiledDriver;
  readonly device: SimulatedDevice;
  readonly plug: SimulatedDevicePort;
  readonly line: FaultLine;
  readonly bytes: ByteLine;
  readonly plan: CheckedPlan;
  readonly backup: TakenBackup;
  readonly storedAtStart: NativeValues;
  readonly identity: DeviceIdentity;
  readonly isByHand: boolean;
  /** Values that live alignment was asked for, each as a whole; the first is what was planned. Empty where nothing is aligned. */
  readonly asked: NativeValues[];
  run: Run;
  session: DeviceSession;
  journals: TwoJournals;
  tabOpen: boolean;
  /** The device timer fired since the owner's last act: labels of a read that it fell into may be late. */
  timerFired: boolean;
  /** What the owner said last. */
  word: OwnerWord;
  /** Recalls and commits that left the page since the beginning: `commit`, `recall 2`. */
  readonly left: string[];
  /** What the wire logs noted beside plain exchanges: events, and frames with a note. */
  readonly noted: WireEntry[];
  /** What a second tab was told that came meanwhile. */
  readonly secondTabs: Result<unknown, OpenFailure>[];
  /** The device has stored other values than those that it was given, or only some of them. */
  deviceLied: boolean;
  /** Working memory when the device timer was armed last. */
  armedOver: NativeValues | null;
};

/** A change of the active mode's timing, with one written before it and one after. */
export const CHANGED = { before: "everywhere.trim.leftPx", raster: "modes[1].timing.pixelClockHz", other: "slots[2].placement.widthPct" } as const;

/** A width that is neither the old nor the planned one. */
function otherWidth(driver: CompiledDriver): NativeValue {
  const setting = driver.byKey.get(CHANGED.other);
  const native = setting && toNative(setting.value, 92);
  if (native === undefined) throw new Error("The device has no width");
  return native;
}

/** The raster at half its clock, every number across halved: no order of single writes keeps within a television between them. */
const HALVED: NativeValues = {
  "modes[1].timing.pixelClockHz": 13_500_000, "modes[1].timing.horizontal.active": 720, "modes[1].timing.horizontal.frontPorch": 20,
  "modes[1].timing.horizontal.sync": 62, "modes[1].timing.horizontal.backPorch": 56, [CHANGED.before]: 4, [CHANGED.other]: 88,
};

/** Slot 2 on another input: there is no slot to step aside to. */
const ELSEWHERE: NativeValues = { "slots[2].input": 1 };

function planOf({ definition }: CompiledDriver, { content, activeSlot, rasterOut }: TakenBackup, way: WorldOptions["way"]): CheckedPlan {
  const document = profileOf({
    everywhere: { trim: { leftPx: 4 } },
    modes: [{ key: "a", timing: { ...rasterOf(definition, 1), pixelClockHz: 27_050_000 } }],
    slots: [{ number: 1, mode: "a" }, { number: 2, placement: { widthPct: 88 } }],
  });
  const halved = backupOf(definition, { ...content.values, ...HALVED });
  const plan = planned({
    backup: content, driver: definition, activeSlot, rasterOut, leftOut: [], acknowledged: [], screen: television, source: null,
    target: way === 1 ? { kind: "profile", document } : { kind: "restore", content: halved },
  });
  if (way !== 1 && plan.way !== way) throw new Error(`The plan goes way ${plan.way}, not ${way}`);
  return plan;
}

/** Plans are the same for the same backup: made once, since only the journal and the device differ from world to world. */
const prepared = new Map<string, { readonly backup: TakenBackup; readonly plan: CheckedPlan }>();

async function prepare({ device, powerOnSlot, dirty, way }: WorldOptions, driver: CompiledDriver, clock: VirtualClock, session: DeviceSession) {
  const key = [device, powerOnSlot, dirty, way].join(" ");
  const known = prepared.get(key);
  if (known) return known;
  const backup = await clock.run(takeBackup(session, driver));
  if (!backup.ok) throw new Error(backup.error.message);
  const made = { backup: backup.value, plan: planOf(driver, backup.value, way) };
  prepared.set(key, made);
  return made;
}

const TIMER_ORDERS: readonly ActionName[] = ["extendTimer", "confirmTimer", "disarmTimer"];

/** How a fault inside the device goes on. */
function operationFault(kind: DeviceFault): OperationFault {
  const faults: Readonly<Record<DeviceFault, OperationFault>> = {
    ignored: { kind: "ignore" }, other: { kind: "store-other" }, torn: { kind: "torn", stored: 1 }, refused: { kind: "refuse" }, busy: { kind: "busy" }, silent: { kind: "silent" },
  };
  return faults[kind];
}

/** Opens a session and lets the world hear what leaves. */
async function openPage(world: Pick<World, "clock" | "pageClock" | "driver" | "line" | "left" | "noted" | "plug">, once: ReadonlyMap<string, string>) {
  const wireLog = createWireLog({ clock: world.clock });
  world.line.forget();
  wireLog.onEntry((entry) => {
    if (entry.direction !== "out") {
      if (entry.direction === "event" || entry.note !== undefined) world.noted.push(entry);
      return;
    }
    world.line.announce(entry.bytes);
    const name = once.get(hexOf(entry.bytes));
    if (name !== undefined) world.left.push(name);
  });
  return world.clock.run(openSession({ port: world.plug.replug(), driver: world.driver, clock: world.pageClock, wireLog }));
}

/** The requests that may leave but once an act, by their bytes. */
function onceOnly({ codec, definition }: CompiledDriver): ReadonlyMap<string, string> {
  const slots = Array.from({ length: definition.slots.count }, (_, index) => definition.slots.first + index);
  const named = [...slots.map((slot) => [`recall ${slot}`, codec.planAction("recall", { slot })] as const), ["commit", codec.planAction("commit", {})] as const];
  return new Map(named.flatMap(([name, request]) => (request ? [[hexOf(request.bytes), name] as const] : [])));
}

type HandSetup = Pick<AlignmentSetup, "journal" | "clock" | "identity"> & { readonly plan: CheckedPlan; readonly backup: TakenBackup };

/** A run without a plan, over the same backup. */
function handSetup({ plan, backup, journal, clock, identity }: HandSetup): AlignmentSetup {
  const { content, activeSlot, rasterOut } = backup;
  const { driver, screen, source } = plan.input;
  return { journal, clock, identity, countdownSeconds: 10, basis: { backup: content, driver, screen, source, activeSlot, rasterOut } };
}

function begun(run: Result<Run, string>): Run {
  if (!run.ok) throw new Error(`Live alignment is refused: ${run.error}`);
  return run.value;
}

export async function createWorld(options: WorldOptions): Promise<World> {
  const { powerOnSlot, dirty, hidden } = options;
  const driver = compiledDriver(FAULT_DEVICES[options.device]);
  const clock = createVirtualClock();
  const pageClock = hidden ? hiddenClock(clock) : clock;
  const own = deviceClock(clock);
  const device = createDeviceModel(driver, { clock: own.clock, values: { ...(options.way === 5 ? ELSEWHERE : {}), "everywhere.powerOnSlot": powerOnSlot }, activeSlot: 1 });
  if (dirty) device.operate({ kind: "write", writes: [{ key: CHANGED.other, value: otherWidth(driver) }] });
  const plug = createSimulatedDevicePort({ model: device, transport: driver.definition.transport, clock, pacing: "none" });
  let next: DeviceFault | null = null;
  const line: FaultLine = new FaultLine(driver, options.faults, {
    onDeviceFault: (kind) => (next = kind),
    onAct(kind) {
      if (kind === "timer" && device.timerArmed) {
        world.timerFired = true;
        own.fireTimer();
      }
      if (kind === "tab" || kind === "browser") closeTab(world, kind === "browser");
      if (kind === "second-tab") void secondTab(world);
      if (kind === "stop" && ["writing", "trying", "keeping"].includes(world.run.view.state)) {
        world.word = "back";
        void world.run.stop();
      }
    },
  });
  const bytes = new ByteLine(options.bytes);
  device.setFault((operation) => {
    if (operation.kind === "action" && operation.name === "armTimer") world.armedOver = device.working;
    const stores = operation.kind === "write" || (operation.kind === "action" && operation.name === "commit");
    if (next === null || (!stores && ["ignored", "other", "torn"].includes(next))) return undefined;
    // By the device's word a refusal of these says that no timer is armed: a device that lies there is another device.
    if (next === "refused" && operation.kind === "action" && TIMER_ORDERS.includes(operation.name)) return undefined;
    const fault = operationFault(next);
    world.deviceLied ||= next === "other" || next === "torn";
    next = null;
    return fault;
  });
  const base = { clock, pageClock, driver, device, plug, line, bytes, left: [] as string[], noted: [] as WireEntry[] };
  const opened = await openPage(base, onceOnly(driver));
  if (!opened.ok) throw new Error(JSON.stringify(opened.error));
  const { session, identity } = opened.value;
  const made = await prepare(options, driver, clock, session);
  const journals = twoJournals();
  const isByHand = options.scenario === "by-hand";
  const setup = { ...made, journal: journals.store, clock: pageClock, identity };
  const run = isByHand ? begun(createAlignment({ ...handSetup(setup), session })) : createRun({ ...setup, session, countdownSeconds: 10 });
  const world: World = {
    ...base, ...made, identity, isByHand, asked: [], storedAtStart: device.stored, run, session, journals,
    tabOpen: true, timerFired: false, word: "back", secondTabs: [], deviceLied: false, armedOver: null,
  };
  world.noted.length = 0;
  // The line counts its requests from the first one on; nothing strikes before the troubles begin.
  plug.setFault(line);
  return world;
}

/** Troubles count from here on. */
export function beginTroubles({ line, plug, bytes }: World): void {
  line.begin();
  bytes.begin();
  plug.setFault(anyOf([line, bytes]));
}

/** Nothing goes wrong from here on. */
export function endTroubles(world: World): void {
  seeToTheLine(world);
  world.plug.setFault(null);
}

/** The page goes: nothing of it is left but its journal, as it was at that moment. */
export function closeTab(world: World, forGood: boolean): void {
  if (!world.tabOpen) return;
  world.tabOpen = false;
  if (forGood) world.journals.loseBrowser();
  world.journals = world.journals.reopen();
  world.run.release();
  void world.session.close();
}

/** Another tab tries the same port while this one has it. */
async function secondTab(world: World): Promise<void> {
  const wireLog = createWireLog({ clock: world.clock });
  world.secondTabs.push(await openSession({ port: world.plug.port, driver: world.driver, clock: world.pageClock, wireLog }));
}

/** Somebody sees to cable and device: what lasted is over. */
export function seeToTheLine({ bytes, plug }: World): void {
  bytes.lift();
  plug.release();
}

/** A page is there again, or the plug: a new session to the device, and the run goes on from what is known. */
export async function comeBack(world: World): Promise<void> {
  const { clock } = world;
  seeToTheLine(world);
  await clock.run(world.session.close());
  const opened = await openPage(world, onceOnly(world.driver));
  if (!opened.ok) return;
  world.session = opened.value.session;
  if (!world.tabOpen) {
    const entries = [...(await world.journals.store.load())];
    const setup = { plan: world.plan, backup: world.backup, identity: world.identity, journal: world.journals.store, clock: world.pageClock };
    world.run = world.isByHand ? begun(restoreAlignment({ ...handSetup(setup), entries })) : restoreRun({ ...setup, countdownSeconds: 10, entries });
    world.tabOpen = true;
  }
  await clock.run(world.run.resume(world.session));
}
