import type { ProfileDocument } from "@/lib/profile/document";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { deviceLimits } from "@/lib/serial/limits";
import type { NativeKey, NativeValues } from "@/lib/serial/native";
import { allowedRasters, type AllowedRasters } from "@/lib/serial/plan/allowed-rasters";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";
import { rasterOfSlot, readOutput, sameOutput } from "@/lib/serial/plan/output-raster";
import { wholeReadSeconds } from "@/lib/serial/plan/plan-cost";
import { planTarget } from "@/lib/serial/plan/plan-target";
import { changedSlotsOf } from "@/lib/serial/plan/planned-changes";
import type { CheckedPlan, PlanInput, PlanStep } from "@/lib/serial/plan/types";
import type { WholeRead } from "@/lib/serial/session/types";
import type { RunFacts } from "./run-facts";
import type { SettingStanding } from "./types";

/** What a run rests on: a plan's input without its target, or the same for a run that is opened by hand. */
export type RunBasis = Pick<PlanInput, "backup" | "driver" | "screen" | "source" | "activeSlot" | "rasterOut">;

/** The two sides of a run: every setting that can be read and written, as it was and as it is planned or last aligned. */
export type RunGoal = {
  readonly basis: RunBasis;
  readonly driver: CompiledDriver;
  readonly old: NativeValues;
  readonly new: NativeValues;
  readonly homeSlot: number;
  readonly allowed: AllowedRasters;
  /** The plan's requests; none where the run is opened by hand. */
  readonly steps: readonly PlanStep[];
  /** Of the steps, at the device's pace. */
  readonly stepsSeconds: number;
  readonly wholeReadSeconds: number;
  readonly changedSlots: readonly number[];
  /** The document that was checked: it says what each slot expects, which no device holds. */
  readonly checked: () => ProfileDocument;
};

function formerValues(driver: CompiledDriver, { backup }: RunBasis): NativeValues {
  const unreadable = new Set(backup.unreadable);
  return Object.fromEntries(
    driver.settings.flatMap(({ key, readable, writable }) => {
      const value = backup.values[key];
      return readable && writable && !unreadable.has(key) && value !== undefined ? [[key, value] as const] : [];
    }),
  );
}

/** The goal of a plan. */
export function goalOf(plan: CheckedPlan): RunGoal {
  const { input } = plan;
  const driver = compiledDriver(input.driver);
  const old = formerValues(driver, input);
  const planned = Object.fromEntries(plan.changes.map(({ key, planned: value }) => [key, value]));
  let checked: ProfileDocument | null = null;
  return {
    basis: input, driver, old, new: { ...old, ...planned },
    homeSlot: input.activeSlot,
    allowed: allowedRasters({ screen: input.screen, before: plan.rasterBefore, after: plan.rasterAfter }),
    steps: plan.steps, stepsSeconds: plan.seconds, wholeReadSeconds: plan.wholeReadSeconds, changedSlots: plan.changedSlots,
    checked: () => (checked ??= planTarget(input, driver, deviceLimits(input.driver, input.backup.document.madeFor?.driver?.firmware)).document),
  };
}

/** The goal of a run that is opened by hand: nothing changes until its first step. */
export function goalByHand(basis: RunBasis): RunGoal {
  const driver = compiledDriver(basis.driver);
  const old = formerValues(driver, basis);
  const out = rasterOfSlot(driver, new Map(Object.entries(basis.backup.values)), basis.activeSlot);
  return {
    basis, driver, old, new: old,
    homeSlot: basis.activeSlot,
    allowed: allowedRasters({ screen: basis.screen, before: out, after: out }),
    steps: [], stepsSeconds: 0, wholeReadSeconds: wholeReadSeconds(driver), changedSlots: [],
    checked: () => basis.backup.document,
  };
}

/** All new is all old: there is nothing to keep. */
export function changesNothing(goal: RunGoal): boolean {
  return Object.entries(goal.new).every(([key, value]) => goal.old[key] === value);
}

/** The same goal with what was aligned by hand, over the plan's values. */
export function alignedGoal(planned: RunGoal, aligned: NativeValues): RunGoal {
  if (Object.keys(aligned).length === 0) return planned;
  const { driver, old, basis } = planned;
  const values = { ...planned.new, ...aligned };
  const changes = Object.entries(values).flatMap(([key, value]) => {
    const was = old[key];
    return was === undefined || was === value ? [] : [{ key, was, planned: value }];
  });
  return { ...planned, new: values, changedSlots: changedSlotsOf(driver, basis.backup.values, values, changes) };
}

/** What a whole read says of a run. */
export type Judgement = {
  readonly allNew: boolean;
  readonly allOld: boolean;
  /** The slot that was active at the start is. */
  readonly home: boolean;
  /** What is read is what non-volatile memory holds too, as far as it matters: no commit left, or it is proved. */
  readonly proved: boolean;
};

/** Keys whose value in a read is not the wanted one. */
export function differingKeys(wanted: NativeValues, read: WholeRead): readonly NativeKey[] {
  return Object.keys(wanted).filter((key) => read.values[key] !== wanted[key]);
}

/** Where timing takes effect on recall, the raster that is out belongs to all new and to all old: it must be the active slot's. */
function rasterInEffect(goal: RunGoal, read: WholeRead): boolean {
  const out = readOutput(goal.driver, read.rasterOut);
  return out === undefined || sameOutput(out, rasterOfSlot(goal.driver, new Map(Object.entries(read.values)), read.activeSlot));
}

/** Judges a whole read against both sides. A restart counts as seen only against a boot count journalled after the last write. */
export function judgeRead(goal: RunGoal, read: WholeRead, facts: RunFacts): Judgement {
  const inEffect = rasterInEffect(goal, read);
  const restartSeen = facts.bootCount !== null && read.bootCount !== undefined && read.bootCount !== facts.bootCount;
  const { volatileWrites } = goal.driver.definition.memory;
  return {
    allNew: inEffect && differingKeys(goal.new, read).length === 0,
    allOld: inEffect && differingKeys(goal.old, read).length === 0,
    home: read.activeSlot === goal.homeSlot,
    proved: !volatileWrites || !facts.commitSent || read.committed === true || restartSeen || facts.statedCycle,
  };
}

/** How each setting of the plan stands, and any other that is not as it was. `null`: nothing could be read. */
export function standingsOf(goal: RunGoal, read: WholeRead | null): readonly SettingStanding[] {
  return Object.keys(goal.new).flatMap((key) => {
    const [was, planned, found] = [goal.old[key], goal.new[key], read?.values[key]];
    if (was === undefined || planned === undefined || (was === planned && (read === null || found === was))) return [];
    const standing = found === undefined ? "unknown" : found === planned && found !== was ? "new" : found === was ? "old" : "other";
    return [{ key, standing, old: was, new: planned, found }];
  });
}
