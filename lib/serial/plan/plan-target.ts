import type { Finding } from "@/lib/profile/finding";
import type { DeviceLimits } from "@/lib/profile/limits";
import type { ProfileDocument } from "@/lib/profile/document";
import { overlay, type Overlay } from "@/lib/profile/overlay";
import { roundDocument } from "@/lib/profile/round";
import { unchangedBetween, type Unchanged } from "@/lib/profile/unchanged";
import { slotsText } from "@/lib/profile/words";
import type { BackupContent } from "@/lib/serial/backup/types";
import { documentFromNative, nativeFromDocument } from "@/lib/serial/backup/document";
import type { CompiledDriver, CompiledSetting } from "@/lib/serial/driver/compiled";
import type { NativeKey, NativeValue, NativeValues } from "@/lib/serial/native";
import { modeOfSlot } from "./output-raster";
import type { PlanInput } from "./types";

/** What a plan aims at: the document to be judged, and the native values that the device would hold. */
export type PlanTarget = {
  /** Mode keys are the device's own numbers; not rounded, so that a check can say what rounding does. */
  readonly document: ProfileDocument;
  readonly unchanged: Unchanged;
  /** Over the backup's values: also those that the device cannot be asked for. */
  readonly values: NativeValues;
  /** Keys that the target names, whether they change or not. */
  readonly named: ReadonlySet<NativeKey>;
  readonly findings: readonly Finding[];
};

/** The profile as it lies on the device: its modes under the device's numbers, without the slots that are left out. */
function placedProfile(profile: ProfileDocument, laid: Overlay, leftOut: readonly number[]): ProfileDocument {
  const place = (key: string | undefined) => (key === undefined ? undefined : laid.modeMap[key]);
  const modes = (profile.modes ?? []).flatMap((mode) => {
    const key = place(mode.key);
    return key === undefined ? [] : [{ ...mode, key }];
  });
  const slots = (profile.slots ?? []).filter(({ number }) => !leftOut.includes(number)).map((slot) => ({ ...slot, mode: place(slot.mode) }));
  return { ...profile, modes, slots };
}

function profileTarget(input: PlanInput, driver: CompiledDriver, limits: DeviceLimits, profile: ProfileDocument): PlanTarget {
  const { backup, leftOut } = input;
  const laid = overlay({ base: backup.document, profile, leftOut, limits });
  const held = roundDocument(laid.merged, limits).document;
  return {
    document: laid.merged,
    unchanged: laid.unchanged,
    values: nativeFromDocument(driver, held, backup.values),
    named: new Set(Object.keys(nativeFromDocument(driver, placedProfile(profile, laid, leftOut), {}))),
    findings: laid.findings,
  };
}

/** What keeps a restored value from being written: a slot that is left out has it, or shares it. */
function isLeftOut(setting: CompiledSetting, leftOut: ReadonlySet<number>, sharedModes: ReadonlySet<number>): boolean {
  if (leftOut.size === 0) return false;
  if (setting.scope === "slot") return setting.number !== undefined && leftOut.has(setting.number);
  if (setting.scope === "mode") return setting.number !== undefined && sharedModes.has(setting.number);
  // What acts everywhere acts on a left-out slot too; which slot comes on at switch-on does not.
  return setting.key !== "everywhere.powerOnSlot";
}

function keptSharedFinding(kept: readonly CompiledSetting[], leftOut: readonly number[]): Finding[] {
  if (kept.length === 0) return [];
  return [
    {
      rule: "plan.shared-with-left-out",
      path: kept[0]?.key ?? "",
      severity: "caution",
      measured: kept.length,
      sentence: `${kept.length === 1 ? "1 value stays" : `${kept.length} values stay`} as now, since ${slotsText(leftOut)} shares them.`,
      detail: "What a left-out slot shares is not written, so other slots with the same mode or trim keep it too.",
      slots: leftOut,
      remedies: [],
    },
  ];
}

function restoreTarget(input: PlanInput, driver: CompiledDriver, limits: DeviceLimits, content: BackupContent): PlanTarget {
  const { backup } = input;
  const leftOut = new Set(input.leftOut);
  const base = new Map(Object.entries(backup.values));
  const sharedModes = new Set([...leftOut].flatMap((slot) => modeOfSlot(driver, base, slot) ?? []));
  const values: Record<NativeKey, NativeValue> = { ...backup.values };
  const named = new Set<NativeKey>();
  const kept: CompiledSetting[] = [];
  for (const setting of driver.settings) {
    const value = content.values[setting.key];
    if (value === undefined) continue;
    if (isLeftOut(setting, leftOut, sharedModes)) {
      if (setting.scope !== "slot" && value !== backup.values[setting.key]) kept.push(setting);
      continue;
    }
    named.add(setting.key);
    values[setting.key] = value;
  }
  const document = withExpectations(documentFromNative(driver, values), content.document);
  const held = (of: ProfileDocument) => roundDocument(of, limits).document;
  return {
    document,
    unchanged: unchangedBetween(held(documentFromNative(driver, backup.values)), held(documentFromNative(driver, values))),
    values,
    named,
    findings: keptSharedFinding(kept, input.leftOut),
  };
}

/** What a slot expects stands in no device: it is taken from the document that is restored, so that inputs can be judged. */
export function withExpectations(document: ProfileDocument, from: ProfileDocument): ProfileDocument {
  const expects = new Map((from.slots ?? []).map((slot) => [slot.number, slot.expects]));
  const slots = (document.slots ?? []).map((slot) => {
    const expected = expects.get(slot.number);
    return expected ? { ...slot, expects: expected } : slot;
  });
  return { ...document, slots };
}

/** Lays the target over the backup: a profile by its own rules, a restore number by number. */
export function planTarget(input: PlanInput, driver: CompiledDriver, limits: DeviceLimits): PlanTarget {
  return input.target.kind === "profile"
    ? profileTarget(input, driver, limits, input.target.document)
    : restoreTarget(input, driver, limits, input.target.content);
}

/** The same target with the values of some modes and slots changed: what way 4 does to it. */
export function retarget(target: PlanTarget, driver: CompiledDriver, values: NativeValues, move: ModeMove): PlanTarget {
  const moved = (mode: string | undefined) => (mode === move.from ? move.to : mode);
  const slots = (target.document.slots ?? []).map((slot) => (slot.mode === undefined ? slot : { ...slot, mode: moved(slot.mode) }));
  const modes = documentFromNative(driver, values).modes ?? [];
  const key = (name: string) => (target.document.modes ?? []).findIndex((mode) => mode.key === name);
  const source = target.document.modes?.[key(move.from)];
  const placed = modes.map((mode) => (mode.key === move.to && source ? { ...source, key: move.to } : mode));
  return {
    ...target,
    values,
    document: { ...target.document, modes: placed, slots },
    unchanged: { slots: target.unchanged.slots, modes: target.unchanged.modes.filter((mode) => mode !== move.to).concat(move.from) },
  };
}

/** A mode of the plan that is written elsewhere. */
export type ModeMove = { readonly from: string; readonly to: string };
