import { checkProfile } from "@/lib/profile/check/check-profile";
import type { DocumentPatch, Finding } from "@/lib/profile/finding";
import { applyPatch, patternOf } from "@/lib/profile/paths";
import { roundDocument } from "@/lib/profile/round";
import { unchangedBetween } from "@/lib/profile/unchanged";
import { fail, ok, type Result } from "@/lib/result";
import { documentFromNative, nativeFromDocument } from "@/lib/serial/backup/document";
import { deviceLimits } from "@/lib/serial/limits";
import type { NativeValues, NativeWrite } from "@/lib/serial/native";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { rasterOfMode } from "@/lib/serial/plan/output-raster";
import { lineTotal, fieldLines } from "@/lib/timing/rates";
import { copyImage, deviceImage, takeStep, type DeviceImage } from "@/lib/serial/plan/device-image";
import { findRoute, type Route } from "@/lib/serial/plan/find-route";
import { stepsCost } from "@/lib/serial/plan/plan-cost";
import { withExpectations } from "@/lib/serial/plan/plan-target";
import { changedSlotsOf } from "@/lib/serial/plan/planned-changes";
import type { PlanStep } from "@/lib/serial/plan/types";
import type { RunGoal } from "./run-goal";

/**
 * Where settings are to be, by path, in the document's units: positions, sizes, trim, and porches, both numbers of an axis
 * together (with `active` where the picture is made wider). Settings that are not named stay where they were last aligned.
 */
export type AlignTarget = readonly DocumentPatch[];

/** One checked step of live alignment, with the requests that make it in an allowed order. */
export type AlignStep = {
  /** Every setting of the run after it. */
  readonly values: NativeValues;
  readonly changes: readonly NativeWrite[];
  readonly steps: readonly PlanStep[];
  /** Of the requests, at the device's pace. */
  readonly seconds: number;
  /** Slots whose picture it moves. */
  readonly movedSlots: readonly number[];
};

/** Why a step is not taken. `findings` holds the stops of a check, and is empty for every other reason. */
export type AlignProblem = {
  readonly code:
    | "not-alignable" // a setting of another kind, or one that this device does not have, or cannot be asked for
    | "totals-change" // the numbers of an axis do not add up to the same line or field as before, once the device has rounded them
    | "stopped" // a check stops it
    | "no-safe-order"; // no order of writes keeps every raster between allowed, there and on the way back
  readonly findings: readonly Finding[];
};

const ALIGNABLE = /^(?:everywhere\.trim\.\w+|slots\[\*\]\.placement\.\w+|modes\[\*\]\.timing\.(?:horizontal|vertical)\.(?:active|frontPorch|backPorch))$/u;

const problem = (code: AlignProblem["code"], findings: readonly Finding[] = []) => fail({ code, findings });

/** Every mode is as long across and down as before: its rates stay. */
function keepsTotals(driver: CompiledDriver, before: NativeValues, after: NativeValues): boolean {
  const [was, is] = [new Map(Object.entries(before)), new Map(Object.entries(after))];
  const { first, count } = driver.definition.modes;
  return Array.from({ length: count }, (_, at) => first + at).every((mode) => {
    const [a, b] = [rasterOfMode(driver, was, mode), rasterOfMode(driver, is, mode)];
    return a === null || b === null || (lineTotal(a) === lineTotal(b) && fieldLines(a) === fieldLines(b));
  });
}

/** What the device would hold, with the document that the check judges. */
type Aimed = { readonly values: NativeValues; readonly stops: readonly Finding[] };

function aimedAt(goal: RunGoal, wanted: NativeValues, target: AlignTarget): Aimed {
  const { driver, basis } = goal;
  const { backup, screen, source } = basis;
  const limits = deviceLimits(basis.driver, backup.document.madeFor?.driver?.firmware);
  const before = { ...backup.values, ...wanted };
  const document = withExpectations(applyPatch(documentFromNative(driver, before), target), goal.checked());
  const held = roundDocument(document, limits).document;
  const after = nativeFromDocument(driver, held, before);
  const stops = checkProfile({
    document, device: limits, source,
    unchanged: unchangedBetween(roundDocument(documentFromNative(driver, backup.values), limits).document, held),
    screen: screen === "accepted-unknown" ? undefined : screen,
  }).filter(({ severity }) => severity === "stop");
  const named = Object.fromEntries(target.flatMap(({ path }) => (after[path] === undefined ? [] : [[path, after[path]]])));
  return { values: { ...wanted, ...named }, stops };
}

/** The requests of a step, where a way back to the former values exists from there too. */
function routeOf(goal: RunGoal, from: DeviceImage, changes: readonly NativeWrite[]): Route | null {
  const { allowed, old, homeSlot } = goal;
  const wanted = Object.fromEntries(changes.map(({ key, value }) => [key, value]));
  const route = findRoute(from, { values: wanted, activeSlot: from.activeSlot, allowed }, [1]);
  if (route === null) return null;
  const end = copyImage(from);
  for (const step of route.steps) takeStep(end, step);
  const former = Object.fromEntries(Object.entries(old).filter(([key, value]) => end.values.get(key) !== value));
  return findRoute(end, { values: former, activeSlot: homeSlot, allowed }, [1, 3, 5]) && route;
}

/**
 * Makes a step of live alignment: checked as every document is, its raster and each one on the way allowed, porches as a unit.
 *
 * @param at.held what the device holds when the step is taken; `wanted`, what was last asked of it: the target changes that
 * @returns null where nothing would change
 */
export function alignStep(
  goal: RunGoal,
  at: { readonly held: NativeValues; readonly wanted: NativeValues; readonly slotOn: number },
  target: AlignTarget,
): Result<AlignStep | null, AlignProblem> {
  const { driver, basis } = goal;
  const isKnown = ({ path, value }: DocumentPatch) =>
    ALIGNABLE.test(patternOf(path) ?? "") && goal.old[path] !== undefined && typeof value === "number" && Number.isFinite(value);
  const isWhole = ({ path, value }: DocumentPatch) => path.endsWith("Pct") || Number.isInteger(value);
  if (!target.every((patch) => isKnown(patch) && isWhole(patch))) return problem("not-alignable");
  const { values, stops } = aimedAt(goal, at.wanted, target);
  const before = { ...basis.backup.values, ...at.held };
  if (!keepsTotals(driver, before, { ...before, ...values })) return problem("totals-change");
  if (stops.length > 0) return problem("stopped", stops);
  const changes = Object.entries(values).flatMap(([key, value]) => (at.held[key] === value ? [] : [{ key, value }]));
  if (changes.length === 0) return ok(null);
  const route = routeOf(goal, deviceImage(driver, { values: before, activeSlot: at.slotOn }), changes);
  if (route === null) return problem("no-safe-order");
  const moved = changes.map(({ key, value }) => ({ key, was: before[key] ?? "", planned: value }));
  return ok({
    values, changes, steps: route.steps, seconds: stepsCost(driver, route.steps).seconds,
    movedSlots: changedSlotsOf(driver, before, values, moved),
  });
}
