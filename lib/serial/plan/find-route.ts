import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { NativeKey, NativeValue, NativeValues } from "@/lib/serial/native";
import type { AllowedRasters } from "./allowed-rasters";
import { applyRecall, copyImage, outputOf, takeStep, type BareStep, type DeviceImage } from "./device-image";
import { orderWrites, type OrderRules } from "./order-writes";
import { modeOfSlot, rasterOfSlot, sameOutput } from "./output-raster";
import { pictureFits } from "./picture-fits";
import type { PlanStep, PlanWay } from "./types";
import { writeUnits, type WriteUnit } from "./write-units";

export type Route = { readonly way: PlanWay; readonly steps: readonly PlanStep[] };

/** Where a device is to be brought: values that differ, the slot that is on at the end, and what may be out between. */
export type Destination = {
  readonly values: NativeValues;
  readonly activeSlot: number;
  readonly allowed: AllowedRasters;
};

/** What a search goes by: the device before, the writes it takes, the image after them. */
type Task = {
  readonly from: DeviceImage;
  readonly to: Destination;
  readonly after: ReadonlyMap<NativeKey, NativeValue>;
  readonly units: readonly WriteUnit[];
  readonly rules: OrderRules;
};

function slotNumbers(driver: CompiledDriver): readonly number[] {
  const { first, count } = driver.definition.slots;
  return Array.from({ length: count }, (_, at) => first + at);
}

/** A device that refuses pictures outside the raster is never asked for one, unless it holds one before or after. */
function slotsToKeepInside(from: DeviceImage, after: ReadonlyMap<NativeKey, NativeValue>): ReadonlySet<number> {
  const { driver } = from;
  if (driver.definition.output.outsideRaster === "cuts") return new Set();
  return new Set(slotNumbers(driver).filter((slot) => pictureFits(driver, from.values, slot) && pictureFits(driver, after, slot)));
}

function taskOf(from: DeviceImage, to: Destination): Task {
  const after = new Map([...from.values, ...Object.entries(to.values)]);
  return {
    from,
    to,
    after,
    units: writeUnits(from.driver, from.values, after),
    rules: { allowed: to.allowed, keepInside: slotsToKeepInside(from, after) },
  };
}

/** Runs steps on a copy; null where a raster on the way is not allowed. */
function tried(task: Task, steps: readonly BareStep[]): readonly PlanStep[] | null {
  const image = copyImage(task.from);
  const taken = steps.map((step) => takeStep(image, step));
  return taken.every((step) => task.to.allowed(step.rasterAfter)) ? taken : null;
}

/** The recall that ends a route: to the wanted slot where another is on, or for timing to take effect. */
function lastRecall(task: Task, at: DeviceImage): readonly BareStep[] {
  const { to, from } = task;
  if (at.activeSlot !== to.activeSlot) return [{ kind: "recall", slot: to.activeSlot, why: "return" }];
  const inEffect = sameOutput(at.raster, rasterOfSlot(from.driver, at.values, to.activeSlot));
  if (from.driver.definition.timingTakesEffect !== "recall" || inEffect) return [];
  return [{ kind: "recall", slot: to.activeSlot, why: "take-effect" }];
}

/** Steps first, then every write in a safe order, then the recall that is needed at the end. */
function writesAfter(task: Task, first: readonly BareStep[]): readonly PlanStep[] | null {
  const image = copyImage(task.from);
  for (const step of first) takeStep(image, step);
  const writes = orderWrites(image, task.units, task.rules);
  if (writes === null) return null;
  for (const step of writes) takeStep(image, step);
  return tried(task, [...first, ...writes, ...lastRecall(task, image)]);
}

/** Way 2 where one request changes what is out: a recall for effect, or a block of several numbers. */
function wayOf(steps: readonly PlanStep[], task: Task): PlanWay {
  let before = outputOf(task.from);
  const byOne = steps.some((step) => {
    const changes = !sameOutput(before, step.rasterAfter);
    before = step.rasterAfter;
    if (step.kind === "recall") return step.why === "take-effect";
    return changes && step.kind === "write" && step.writes.length > 1;
  });
  return byOne ? 2 : 1;
}

/** The wanted slot first where another is on and no recall has to follow anyway; else the writes first. */
function plainRoute(task: Task): Route | null {
  const { from, to } = task;
  const home: BareStep = { kind: "recall", slot: to.activeSlot, why: "return" };
  const away = from.activeSlot !== to.activeSlot;
  const homeAtOnce = away && from.driver.definition.timingTakesEffect !== "recall";
  const steps = (homeAtOnce ? writesAfter(task, [home]) : null) ?? writesAfter(task, []);
  return steps && { way: wayOf(steps, task), steps };
}

/** Slots that can stand in: on the same input, with a picture, and nothing about what they put out changes. */
function standIns(task: Task): readonly number[] {
  const { from, to, after } = task;
  const inputOf = (values: ReadonlyMap<NativeKey, NativeValue>, slot: number) => values.get(`slots[${slot}].input`);
  return slotNumbers(from.driver).filter((slot) => {
    if (slot === to.activeSlot || modeOfSlot(from.driver, from.values, slot) === null) return false;
    const input = inputOf(from.values, slot);
    if (input !== inputOf(from.values, to.activeSlot) || input !== inputOf(after, slot)) return false;
    const raster = rasterOfSlot(from.driver, from.values, slot);
    return raster !== null && sameOutput(raster, rasterOfSlot(from.driver, after, slot));
  });
}

/** Another slot is put on meanwhile; the wanted one again at the end. */
function asideRoute(task: Task): Route | null {
  for (const slot of standIns(task)) {
    const aside = copyImage(task.from);
    applyRecall(aside, slot);
    if (!task.to.allowed(outputOf(aside))) continue;
    const first: readonly BareStep[] = slot === task.from.activeSlot ? [] : [{ kind: "recall", slot, why: "step-aside" }];
    const steps = writesAfter(task, first);
    if (steps) return { way: 3, steps };
  }
  return null;
}

/** The output is muted meanwhile. */
function mutedRoute(task: Task): Route | null {
  const { actions } = task.from.driver.definition;
  if (actions.muteOn === undefined || actions.muteOff === undefined || task.units.length === 0) return null;
  const image = copyImage(task.from);
  takeStep(image, { kind: "mute", on: true });
  const writes = orderWrites(image, task.units, task.rules);
  if (writes === null) return null;
  for (const step of writes) takeStep(image, step);
  const steps = tried(task, [
    { kind: "mute", on: true }, ...writes, ...lastRecall(task, image), { kind: "mute", on: false },
  ]);
  return steps && { way: 5, steps };
}

const ROUTES: Readonly<Record<1 | 2 | 3 | 5, (task: Task) => Route | null>> = {
  1: plainRoute,
  2: plainRoute,
  3: asideRoute,
  5: mutedRoute,
};

/**
 * The first of the ways asked for that brings a device where it is to be, with an allowed raster out at every moment.
 *
 * @param from the device now; left as it was
 * @param ways 1 and 2 are one search: which of them it was depends on what changes the raster
 */
export function findRoute(from: DeviceImage, to: Destination, ways: readonly (1 | 2 | 3 | 5)[]): Route | null {
  const task = taskOf(from, to);
  for (const way of ways) {
    const route = ROUTES[way](task);
    if (route) return route;
  }
  return null;
}

/** Every write that differs and the recall at the end, whatever is out between: for a device that is off every safe way. */
export function directRoute(from: DeviceImage, to: Destination): readonly PlanStep[] {
  const task = taskOf(from, to);
  const image = copyImage(from);
  const writes = task.units.map((unit) => takeStep(image, { kind: "write", ...unit }));
  return [...writes, ...lastRecall(task, image).map((step) => takeStep(image, step))];
}
