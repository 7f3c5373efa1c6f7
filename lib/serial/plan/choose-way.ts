import type { Finding } from "@/lib/profile/finding";
import type { RasterTiming } from "@/lib/timing/raster";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { NativeValues } from "@/lib/serial/native";
import { allowedRasters } from "./allowed-rasters";
import { copyImage, deviceImage, outputOf, takeStep, type DeviceImage } from "./device-image";
import { findRoute, type Destination, type Route } from "./find-route";
import { toFreeMode } from "./free-mode";
import { rasterOfSlot, sameOutput } from "./output-raster";
import { changesOf } from "./planned-changes";
import { retarget, type PlanTarget } from "./plan-target";
import type { PlanInput } from "./types";

export type ChosenWay = {
  readonly route: Route;
  readonly rasterBefore: RasterTiming | null;
  readonly rasterAfter: RasterTiming | null;
};

/** A way, with the target as the way made it; or why there is none. */
export type Choice = { readonly way: ChosenWay | null; readonly target: PlanTarget; readonly findings: readonly Finding[] };

const STEPWISE = [1, 3] as const;

function valuesToWrite(input: PlanInput, driver: CompiledDriver, target: PlanTarget): NativeValues {
  return Object.fromEntries(changesOf(driver, input.backup, target.values).map(({ key, planned }) => [key, planned]));
}

/** A route there for which a route back exists too, both with an allowed raster at every moment. */
function routeAndBack(input: PlanInput, driver: CompiledDriver, target: PlanTarget, ways: readonly (1 | 2 | 3 | 5)[]): ChosenWay | null {
  const start = startImage(input, driver);
  const wanted = valuesToWrite(input, driver, target);
  const rasterBefore = outputOf(start);
  const rasterAfter = rasterOfSlot(driver, new Map([...start.values, ...Object.entries(wanted)]), input.activeSlot);
  const allowed = allowedRasters({ screen: input.screen, before: rasterBefore, after: rasterAfter });
  const there: Destination = { values: wanted, activeSlot: input.activeSlot, allowed };
  const route = findRoute(start, there, ways);
  if (route === null) return null;
  const end = copyImage(start);
  for (const step of route.steps) takeStep(end, step);
  const former = Object.fromEntries(Object.keys(wanted).flatMap((key) => (input.backup.values[key] === undefined ? [] : [[key, input.backup.values[key]]])));
  const back = findRoute(end, { ...there, values: former }, [1, 3, 5]);
  return back && endsAsBegun(end, back, start) ? { route, rasterBefore, rasterAfter: outputOf(end) } : null;
}

function endsAsBegun(end: DeviceImage, back: Route, start: DeviceImage): boolean {
  const image = copyImage(end);
  for (const step of back.steps) takeStep(image, step);
  const sameValues = [...start.values].every(([key, value]) => image.values.get(key) === value);
  return sameValues && image.activeSlot === start.activeSlot && sameOutput(outputOf(image), outputOf(start));
}

function startImage(input: PlanInput, driver: CompiledDriver): DeviceImage {
  return deviceImage(driver, { values: input.backup.values, activeSlot: input.activeSlot, rasterOut: input.rasterOut });
}

/** What is out is not what the active slot's mode says: the way back could not bring it out again. */
function notInEffect(input: PlanInput, driver: CompiledDriver): boolean {
  const start = startImage(input, driver);
  return !sameOutput(start.raster, rasterOfSlot(driver, start.values, input.activeSlot));
}

function notInEffectFinding(slot: number): Finding {
  return {
    rule: "plan.raster-not-in-effect",
    path: `slots[${slot}].mode`,
    severity: "stop",
    sentence: `What the device puts out is not the mode of slot ${slot}.`,
    detail: `Its timing was changed without taking effect, so it could not be put back. Make slot ${slot} active again, back up, then plan.`,
    slots: [slot],
    remedies: [],
  };
}

function noSafeOrderFinding(input: PlanInput, driver: CompiledDriver): Finding {
  const slot = input.activeSlot;
  const freeMode = input.target.kind === "restore" ? "" : ", or leave a mode free that no slot uses";
  const mute = driver.definition.actions.muteOn === undefined ? " This device cannot mute its output." : "";
  return {
    rule: "plan.no-safe-order",
    path: `slots[${slot}].mode`,
    severity: "stop",
    sentence: `No order of writes keeps every raster between safe while slot ${slot} is active.`,
    detail: `Make another slot active first, keep a slot on the same input whose mode fits the screen and stays${freeMode}.${mute}`,
    slots: [slot],
    remedies: [{ kind: "leave-out", label: `Leave slot ${slot} out`, slot }],
  };
}

/** The first way that works, in the order of the ways. A restore writes modes by number, so it never takes a free one. */
export function chooseWay(input: PlanInput, driver: CompiledDriver, target: PlanTarget): Choice {
  if (Object.keys(valuesToWrite(input, driver, target)).length === 0) return { way: null, target, findings: [] };
  if (notInEffect(input, driver)) return { way: null, target, findings: [notInEffectFinding(input.activeSlot)] };
  const stepwise = routeAndBack(input, driver, target, STEPWISE);
  if (stepwise) return { way: stepwise, target, findings: [] };
  if (input.target.kind === "profile") {
    const free = toFreeMode(driver, input.backup.values, target.values, input.activeSlot);
    const moved = free && retarget(target, driver, free.values, free.move);
    const way = moved && routeAndBack(input, driver, moved, [1]);
    if (free && moved && way) return { way: { ...way, route: { ...way.route, way: 4 } }, target: moved, findings: free.findings };
  }
  const muted = routeAndBack(input, driver, target, [5]);
  if (muted) return { way: muted, target, findings: [] };
  return { way: null, target, findings: [noSafeOrderFinding(input, driver)] };
}
