import { takeBackup } from "@/lib/serial/backup/take-backup";
import type { TakenBackup } from "@/lib/serial/backup/types";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import { toNative } from "@/lib/serial/driver/neutral";
import type { NativeValue } from "@/lib/serial/native";
import { allowedRasters } from "@/lib/serial/plan/allowed-rasters";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";
import { createAlignment, restoreAlignment, type AlignmentSetup, type Run } from "@/lib/serial/run/create-run";
import type { AlignTarget } from "@/lib/serial/run/align-step";
import type { DeviceModelOptions } from "@/lib/serial/simulator/device-model";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { RasterTiming } from "@/lib/timing/raster";
import { FAULT_DEVICES } from "@/tests/faults/run/drivers";
import { television } from "@/tests/unit/serial/plan/plan-fixtures";
import { connect, type Rig } from "@/tests/unit/serial/simulated-rig";
import { journalOf } from "./run-rig";

/** The three shipped devices with two slots and two modes: everything else as shipped. */
export const DEVICES = FAULT_DEVICES;

export type AlignRig = Rig & {
  readonly backup: TakenBackup;
  readonly setup: AlignmentSetup;
  readonly journal: ReturnType<typeof journalOf>;
  readonly run: Run;
  /** Rasters that were out since the backup and that the screen does not take, idle ones of a start aside. */
  readonly notAllowed: (RasterTiming | null)[];
};

export type AlignRigOptions = {
  readonly device?: Omit<DeviceModelOptions, "clock">;
  readonly screen?: ScreenEnvelope;
};

/** A device on a wire, backed up, with a run for live alignment that is ready. */
export async function alignRig(definition: DriverDefinition, { device, screen = television }: AlignRigOptions = {}): Promise<AlignRig> {
  const rig = await connect(compiledDriver(definition), device, "none");
  const taken = await rig.clock.run(takeBackup(rig.session, rig.driver));
  if (!taken.ok) throw new Error(taken.error.message);
  const { content, activeSlot, rasterOut, identity } = taken.value;
  const journal = journalOf();
  const basis = { backup: content, driver: definition, screen, source: null, activeSlot, rasterOut };
  const setup: AlignmentSetup = { basis, journal, clock: rig.clock, identity, countdownSeconds: 10 };
  const out = rig.device.rasterOut;
  const allowed = allowedRasters({ screen, before: out, after: out });
  const notAllowed: (RasterTiming | null)[] = [];
  rig.device.onRaster((raster, cause) => {
    if (cause !== "switch-on" && cause !== "started" && !allowed(raster)) notAllowed.push(raster);
  });
  const run = createAlignment({ ...setup, session: rig.session });
  if (!run.ok) throw new Error(run.error);
  return { ...rig, backup: taken.value, setup, journal, notAllowed, run: run.value };
}

/** The same, trying. */
export async function aligning(definition: DriverDefinition, options: AlignRigOptions = {}): Promise<AlignRig> {
  const rig = await alignRig(definition, options);
  await rig.clock.run(rig.run.start());
  if (rig.run.view.state !== "trying") throw new Error(`The run is ${rig.run.view.state}: ${rig.run.view.why}`);
  return rig;
}

/** The page was closed: all that is left is the journal. */
export function reloadAlignment(rig: AlignRig): Run {
  const run = restoreAlignment({ ...rig.setup, entries: [...rig.journal.entries] });
  if (!run.ok) throw new Error(run.error);
  return run.value;
}

/** The picture of slot 1 so many px to the right. */
export const offset = (px: number): AlignTarget => [{ path: "slots[1].placement.offsetPx", value: px }];

/** Mode 1's picture so many px to the right of the factory's porches, 38 and 114 clocks. */
export const porches = (px: number): AlignTarget => [
  { path: "modes[1].timing.horizontal.frontPorch", value: 38 - px },
  { path: "modes[1].timing.horizontal.backPorch", value: 114 + px },
];

/** What a target is in the device's own words. */
export function nativeOf({ driver }: Rig, target: AlignTarget): Record<string, NativeValue> {
  return Object.fromEntries(
    target.map(({ path, value }) => {
      const setting = driver.byKey.get(path);
      const native = setting && value !== null ? toNative(setting.value, value) : undefined;
      if (native === undefined) throw new Error(`The device has no ${path}`);
      return [path, native];
    }),
  );
}

/** Every device takes a step: the owner of one without trial memory has been told. */
export const align = (rig: AlignRig, target: AlignTarget, run: Run = rig.run) => run.align(target, { storesAtOnceAccepted: true });
