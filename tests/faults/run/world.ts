import { takeBackup } from "@/lib/serial/backup/take-backup";
import type { Clock } from "@/lib/serial/clock";
import { createVirtualClock, type VirtualClock } from "@/lib/serial/clock/virtual-clock";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import type { NativeValues } from "@/lib/serial/native";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";
import type { CheckedPlan } from "@/lib/serial/plan/types";
import { createRun, restoreRun, type Run } from "@/lib/serial/run/create-run";
import type { JournalEntry, OwnerWord } from "@/lib/serial/run/types";
import { openSession } from "@/lib/serial/session/open-session";
import type { DeviceIdentity, DeviceSession } from "@/lib/serial/session/types";
import { createDeviceModel, type SimulatedDevice } from "@/lib/serial/simulator/device-model";
import { createSimulatedDevicePort, type SimulatedDevicePort } from "@/lib/serial/simulator/simulated-device-port";
import { createWireLog } from "@/lib/serial/wire-log";
import { planned, profileOf, rasterOf, television } from "@/tests/unit/serial/plan/plan-fixtures";
import { journalOf } from "@/tests/unit/serial/run/run-rig";
import type { OperationFault } from "@/lib/serial/simulator/device-operations";
import { FaultLine, type Fault } from "./fault-line";

/** A timer of the device that is this long is the one that puts values back: work and starts take less. */
const DEVICE_TIMER_MS = 5_000;

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

export type WorldOptions = {
  readonly definition: DriverDefinition;
  readonly faults: readonly Fault[];
  /** The slot that a restart puts on. */
  readonly powerOnSlot: 1 | 2;
  /** A change by hand that was never committed: non-volatile memory differs from the start. */
  readonly dirty: boolean;
};

/** One device, one page and one owner, with what may go wrong between them. */
export type World = {
  readonly clock: VirtualClock;
  readonly driver: CompiledDriver;
  readonly device: SimulatedDevice;
  readonly plug: SimulatedDevicePort;
  readonly line: FaultLine;
  readonly plan: CheckedPlan;
  readonly storedAtStart: NativeValues;
  readonly identity: DeviceIdentity;
  run: Run;
  session: DeviceSession;
  entries: JournalEntry[];
  tabOpen: boolean;
  /** The device timer fired since the owner's last act: labels of a read that it fell into may be late. */
  timerFired: boolean;
  /** What the owner said last. */
  word: OwnerWord;
  /** Requests of recalls and commits that left since the beginning. */
  readonly left: string[];
  /** Working memory when the device timer was armed last. */
  armedOver: NativeValues | null;
};

/** A change of the active mode's timing, with one written before it and one after. */
export const CHANGED = { before: "everywhere.trim.leftPx", raster: "modes[1].timing.pixelClockHz", other: "slots[2].placement.widthPct" } as const;

function planOf(definition: DriverDefinition, backup: Awaited<ReturnType<typeof takeBackup>>): { plan: CheckedPlan; identity: DeviceIdentity } {
  if (!backup.ok) throw new Error(backup.error.message);
  const { content, activeSlot, rasterOut, identity } = backup.value;
  const document = profileOf({
    everywhere: { trim: { leftPx: 4 } },
    modes: [{ key: "a", timing: { ...rasterOf(definition, 1), pixelClockHz: 27_050_000 } }],
    slots: [{ number: 1, mode: "a" }, { number: 2, placement: { widthPct: 88 } }],
  });
  const plan = planned({
    backup: content, driver: definition, activeSlot, rasterOut, leftOut: [], acknowledged: [], screen: television, source: null,
    target: { kind: "profile", document },
  });
  return { plan, identity };
}

/** Plans are the same for the same backup: made once, since only the journal and the device differ from world to world. */
const plans = new Map<string, { plan: CheckedPlan; identity: DeviceIdentity }>();

export async function createWorld(options: WorldOptions): Promise<World> {
  const { definition, faults, powerOnSlot, dirty } = options;
  const clock = createVirtualClock();
  const driver = compiledDriver(definition);
  const own = deviceClock(clock);
  const device = createDeviceModel(driver, { clock: own.clock, values: { "everywhere.powerOnSlot": powerOnSlot }, activeSlot: 1 });
  if (dirty) device.operate({ kind: "write", writes: [{ key: CHANGED.other, value: 920 }] });
  const plug = createSimulatedDevicePort({ model: device, transport: definition.transport, clock, pacing: "none" });
  let storage: OperationFault | null = null;
  const line: FaultLine = new FaultLine(faults, {
    onRequest: (text) => {
      if (/^\*RCL \d|^MEM:COMMIT(?!TED)/u.test(text)) world.left.push(text.replace(/\*[0-9A-F]{4}$/u, ""));
    },
    onFault(kind) {
      if (kind === "ignored") storage = { kind: "ignore" };
      if (kind === "other") storage = { kind: "store-other" };
      if (kind === "torn") storage = { kind: "torn", stored: 1 };
      if (kind === "timer" && device.timerArmed) {
        world.timerFired = true;
        own.fireTimer();
      }
      if (kind === "tab") closeTab(world);
      if (kind === "stop" && ["writing", "trying", "keeping"].includes(world.run.view.state)) {
        world.word = "back";
        void world.run.stop();
      }
    },
  });
  device.setFault((operation) => {
    if (operation.kind === "action" && operation.name === "armTimer") world.armedOver = device.working;
    const stores = operation.kind === "write" || (operation.kind === "action" && operation.name === "commit");
    const fault = stores ? storage : null;
    storage = null;
    return fault ?? undefined;
  });
  const wireLog = createWireLog({ clock });
  const opened = await clock.run(openSession({ port: plug.port, driver, clock, wireLog }));
  if (!opened.ok) throw new Error(JSON.stringify(opened.error));
  const { session } = opened.value;
  const key = JSON.stringify([definition.slug, definition.status.committed === undefined, powerOnSlot, dirty]);
  const made = plans.get(key) ?? planOf(definition, await clock.run(takeBackup(session, driver)));
  plans.set(key, made);
  const journal = journalOf();
  const run = createRun({ ...made, journal, clock, session, countdownSeconds: 10 });
  const world: World = {
    clock, driver, device, plug, line, ...made, storedAtStart: device.stored, run, session, entries: journal.entries,
    tabOpen: true, timerFired: false, word: "back", left: [], armedOver: null,
  };
  plug.setFault(line);
  line.begin();
  return world;
}

/** The page goes: nothing of it is left but its journal, as it was at that moment. */
export function closeTab(world: World): void {
  if (!world.tabOpen) return;
  world.tabOpen = false;
  world.entries = [...world.entries];
  world.run.release();
  void world.session.close();
}

/** A page is there again, or the plug: a new session to the device, and the run goes on from what is known. */
export async function comeBack(world: World): Promise<void> {
  const { clock, plug, driver } = world;
  await clock.run(world.session.close());
  const wireLog = createWireLog({ clock });
  const opened = await clock.run(openSession({ port: plug.replug(), driver, clock, wireLog }));
  if (!opened.ok) return;
  world.session = opened.value.session;
  if (!world.tabOpen) {
    const journal = journalOf(world.entries);
    world.run = restoreRun({ plan: world.plan, identity: world.identity, journal, clock, countdownSeconds: 10, entries: [...world.entries] });
    world.tabOpen = true;
  }
  await clock.run(world.run.resume(world.session));
}
