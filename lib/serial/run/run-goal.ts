import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { NativeKey, NativeValues } from "@/lib/serial/native";
import { allowedRasters, type AllowedRasters } from "@/lib/serial/plan/allowed-rasters";
import { rasterOfSlot, readOutput, sameOutput } from "@/lib/serial/plan/output-raster";
import type { CheckedPlan } from "@/lib/serial/plan/types";
import type { WholeRead } from "@/lib/serial/session/types";
import type { RunFacts } from "./run-facts";
import type { SettingStanding } from "./types";

/** The two sides of a run: every setting that can be read and written, as it was and as it is planned. */
export type RunGoal = {
  readonly plan: CheckedPlan;
  readonly driver: CompiledDriver;
  readonly old: NativeValues;
  readonly new: NativeValues;
  readonly homeSlot: number;
  readonly allowed: AllowedRasters;
};

export function goalOf(plan: CheckedPlan, driver: CompiledDriver): RunGoal {
  const { backup, activeSlot, screen } = plan.input;
  const unreadable = new Set(backup.unreadable);
  const held = driver.settings.flatMap(({ key, readable, writable }) => {
    const value = backup.values[key];
    return readable && writable && !unreadable.has(key) && value !== undefined ? [[key, value] as const] : [];
  });
  const old = Object.fromEntries(held);
  const planned = Object.fromEntries(plan.changes.map(({ key, planned }) => [key, planned]));
  return {
    plan,
    driver,
    old,
    new: { ...old, ...planned },
    homeSlot: activeSlot,
    allowed: allowedRasters({ screen, before: plan.rasterBefore, after: plan.rasterAfter }),
  };
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
