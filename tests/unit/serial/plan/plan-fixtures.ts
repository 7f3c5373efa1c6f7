import { documentFromNative } from "@/lib/serial/backup/document";
import type { BackupContent } from "@/lib/serial/backup/types";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import type { NativeValues } from "@/lib/serial/native";
import { allowedRasters } from "@/lib/serial/plan/allowed-rasters";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";
import { rasterOfSlot } from "@/lib/serial/plan/output-raster";
import { planChanges } from "@/lib/serial/plan/plan-changes";
import type { CheckedPlan, PlanInput, Planned } from "@/lib/serial/plan/types";
import { PROFILE_FORMAT, type ProfileDocument } from "@/lib/profile/document";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { RasterTiming } from "@/lib/timing/raster";
import { screenPresets } from "@/lib/timing/screen-presets";

/** The shipped text driver, and the same device with timing that takes effect at every write: fixtures of this project. */
export const onRecall: DriverDefinition = lanternfieldLf8;
export const onWrite: DriverDefinition = {
  ...lanternfieldLf8,
  slug: "writes-at-once",
  timingTakesEffect: "write",
  output: { ...lanternfieldLf8.output, outsideRaster: "cuts" },
};
/** And one with a mute. */
export const withMute: DriverDefinition = {
  ...onWrite,
  slug: "writes-at-once-muted",
  actions: {
    ...onWrite.actions,
    muteOn: { kind: "text", request: "OUT:MUTE ON", reply: "OUT:MUTE=ON" },
    muteOff: { kind: "text", request: "OUT:MUTE OFF", reply: "OUT:MUTE=OFF" },
  },
};

function preset(id: string): ScreenEnvelope {
  const found = screenPresets.find((one) => one.id === id);
  if (!found) throw new Error(`No screen ${id}`);
  return found.envelope;
}

/** A television of both systems: 15.469 to 15.892 kHz. */
export const television = preset("bt470-both");
export const television525 = preset("bt470-525");

export function backupOf(definition: DriverDefinition, over: NativeValues = {}): BackupContent {
  const driver = compiledDriver(definition);
  const values = { ...Object.fromEntries(driver.settings.map(({ key, initial }) => [key, initial])), ...over };
  return {
    driver: { slug: definition.slug, version: definition.version },
    values,
    unreadable: [],
    document: documentFromNative(driver, values),
  };
}

export function profileOf(parts: Omit<ProfileDocument, "format" | "version">): ProfileDocument {
  return { format: PROFILE_FORMAT, version: 1, ...parts };
}

export function inputOf(definition: DriverDefinition, over: Partial<PlanInput>): PlanInput {
  return {
    backup: backupOf(definition),
    target: { kind: "profile", document: profileOf({}) },
    leftOut: [],
    driver: definition,
    screen: television,
    source: null,
    activeSlot: 1,
    acknowledged: [],
    ...over,
  };
}

/** Plans, acknowledges every caution, plans again. */
export function planAcknowledged(input: PlanInput): Planned {
  const first = planChanges(input);
  return first.toAcknowledge.length === 0 ? first : planChanges({ ...input, acknowledged: first.toAcknowledge });
}

export function planned(input: PlanInput): CheckedPlan {
  const { plan, findings } = planAcknowledged(input);
  if (!plan) throw new Error(`No plan: ${findings.filter(({ severity }) => severity === "stop").map(({ sentence }) => sentence).join(" ")}`);
  return plan;
}

/** The factory raster of a slot of the fixtures. */
export function rasterOf(definition: DriverDefinition, slot: number): RasterTiming {
  const driver: CompiledDriver = compiledDriver(definition);
  const raster = rasterOfSlot(driver, new Map(Object.entries(backupOf(definition).values)), slot);
  if (!raster) throw new Error(`Slot ${slot} is empty`);
  return raster;
}

/** Every raster that a plan puts out is one that the screen takes, or was out before. */
export function rastersNotAllowed(plan: CheckedPlan): readonly (RasterTiming | null)[] {
  const allowed = allowedRasters({ screen: plan.input.screen, before: plan.rasterBefore, after: plan.rasterAfter });
  return plan.steps.map((step) => step.rasterAfter).filter((raster) => !allowed(raster));
}
