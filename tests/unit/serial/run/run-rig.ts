import type { ProfileDocument } from "@/lib/profile/document";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";
import { takeBackup } from "@/lib/serial/backup/take-backup";
import type { TakenBackup } from "@/lib/serial/backup/types";
import type { VirtualClock } from "@/lib/serial/clock/virtual-clock";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { allowedRasters } from "@/lib/serial/plan/allowed-rasters";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";
import type { CheckedPlan, PlanInput } from "@/lib/serial/plan/types";
import { createRun, restoreRun, type Run } from "@/lib/serial/run/create-run";
import type { JournalEntry, JournalStore, RunState } from "@/lib/serial/run/types";
import { openSession } from "@/lib/serial/session/open-session";
import type { DeviceSession } from "@/lib/serial/session/types";
import type { DeviceModelOptions } from "@/lib/serial/simulator/device-model";
import { connect, type Rig } from "@/tests/unit/serial/simulated-rig";
import { planned, profileOf, rasterOf, television } from "@/tests/unit/serial/plan/plan-fixtures";

/** The text driver with fewer slots and modes: a whole read is short, and everything else as shipped. */
export function cutDown(definition: DriverDefinition, slots: number, modes: number): DriverDefinition {
  const fits = (key: string) => {
    const [, kind, number] = /^(slots|modes)\[(\d+)\]/u.exec(key) ?? [];
    return kind === undefined || Number(number) <= (kind === "slots" ? slots : modes);
  };
  return {
    ...definition,
    slots: { ...definition.slots, count: slots },
    modes: { ...definition.modes, count: modes },
    factory: Object.fromEntries(Object.entries(definition.factory).filter(([key]) => fits(key))),
  };
}

export const smallLf8 = cutDown(lanternfieldLf8, 3, 4);

/** A journal as a browser keeps it: what is appended is there for whoever opens the page next. */
export function journalOf(entries: JournalEntry[] = []): JournalStore & { readonly entries: JournalEntry[] } {
  return {
    entries,
    append: (entry) => {
      entries.push(entry);
      return Promise.resolve();
    },
    load: () => Promise.resolve(entries),
  };
}

export type RunRig = Rig & {
  readonly backup: TakenBackup;
  readonly plan: CheckedPlan;
  readonly journal: ReturnType<typeof journalOf>;
  readonly run: Run;
  /** Rasters that were out since the backup and that no plan allows, idle ones of a start aside. */
  readonly notAllowed: (RasterTiming | null)[];
};

export type RunRigOptions = {
  readonly definition?: DriverDefinition;
  readonly device?: Omit<DeviceModelOptions, "clock">;
  readonly screen?: ScreenEnvelope;
  readonly source?: SourceFormat | null;
  readonly target: ProfileDocument | PlanInput["target"];
  readonly countdownSeconds?: number;
};

/** A device on a wire, backed up, with a plan and a run that is ready. */
export async function runRig(options: RunRigOptions): Promise<RunRig> {
  const definition = options.definition ?? smallLf8;
  const rig = await connect(compiledDriver(definition), options.device);
  const backup = await rig.clock.run(takeBackup(rig.session, rig.driver));
  if (!backup.ok) throw new Error(backup.error.message);
  const { content, activeSlot, rasterOut, identity } = backup.value;
  const plan = planned({
    backup: content, driver: definition, activeSlot, rasterOut, leftOut: [], acknowledged: [],
    screen: options.screen ?? television, source: options.source ?? null,
    target: "kind" in options.target ? (options.target as PlanInput["target"]) : { kind: "profile", document: options.target as ProfileDocument },
  });
  const journal = journalOf();
  const setup = { plan, journal, clock: rig.clock, identity, countdownSeconds: options.countdownSeconds };
  const allowed = allowedRasters({ screen: plan.input.screen, before: plan.rasterBefore, after: plan.rasterAfter });
  const notAllowed: (RasterTiming | null)[] = [];
  rig.device.onRaster((raster, cause) => {
    if (cause !== "switch-on" && cause !== "started" && !allowed(raster)) notAllowed.push(raster);
  });
  return { ...rig, backup: backup.value, plan, journal, notAllowed, run: createRun({ ...setup, session: rig.session }) };
}

/** Opens a new session to the same plug, as after a replug or a reload. */
export async function reconnect(rig: Rig): Promise<DeviceSession> {
  const opened = await rig.clock.run(openSession({ port: rig.plug.replug(), driver: rig.driver, clock: rig.clock, wireLog: rig.wireLog }));
  if (!opened.ok) throw new Error(JSON.stringify(opened.error));
  return opened.value.session;
}

/** The page was closed: all that is left is the journal. */
export function reload(rig: RunRig, plan: CheckedPlan = rig.plan): Run {
  return restoreRun({ plan, journal: rig.journal, clock: rig.clock, identity: rig.backup.identity, entries: [...rig.journal.entries] });
}

/** Lets a virtual clock run until an act settles. */
export const settle = <T>(clock: VirtualClock, act: PromiseLike<T>): Promise<T> => clock.run(act);

/** The active slot's raster moved and clocked a little faster, and a slot that is not on renamed. */
export function retimed(timing: RasterTiming): ProfileDocument {
  return profileOf({
    modes: [{ key: "a", timing: { ...timing, pixelClockHz: 27_050_000, horizontal: { ...timing.horizontal, frontPorch: 30, backPorch: 122 } } }],
    slots: [{ number: 1, mode: "a", name: "Cabinet A" }, { number: 2, placement: { offsetPx: 0, widthPct: 88 } }],
  });
}
export const target = retimed(rasterOf(smallLf8, 1));

export const statesOf = (rig: RunRig): RunState[] => rig.journal.entries.flatMap((entry) => (entry.kind === "state" ? [entry.state] : []));
export const requestsOf = (rig: RunRig, outcome: string) =>
  rig.journal.entries.flatMap((entry) => (entry.kind === "request" && entry.outcome === outcome ? [entry.request] : []));
export const newValues = ({ plan }: RunRig) => Object.fromEntries(plan.changes.map(({ key, planned: value }) => [key, value]));
export const formerValues = ({ plan }: RunRig) => Object.fromEntries(plan.changes.map(({ key, was }) => [key, was]));

export async function trying(rig: RunRig): Promise<RunRig> {
  await settle(rig.clock, rig.run.start());
  if (rig.run.view.state !== "trying") throw new Error(`The run is ${rig.run.view.state}: ${rig.run.view.why}`);
  return rig;
}
