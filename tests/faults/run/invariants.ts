import type { NativeValues } from "@/lib/serial/native";
import { rasterOfSlot, sameOutput } from "@/lib/serial/plan/output-raster";
import { factsFrom } from "@/lib/serial/run/run-facts";
import type { RunState, RunView } from "@/lib/serial/run/types";
import { CHANGED, type World } from "./world";

const changedKeys = Object.values(CHANGED);

function holds(values: NativeValues, wanted: NativeValues): boolean {
  return changedKeys.every((key) => values[key] === wanted[key]);
}

export type Sides = { readonly old: NativeValues; readonly new: NativeValues };

export function sidesOf({ plan }: World): Sides {
  return {
    old: Object.fromEntries(plan.changes.map(({ key, was }) => [key, was])),
    new: Object.fromEntries(plan.changes.map(({ key, planned }) => [key, planned])),
  };
}

/** The raster out is that of the slot that is on, as its values are. */
function rasterInEffect({ device, driver }: World): boolean {
  return sameOutput(device.rasterOut, rasterOfSlot(driver, new Map(Object.entries(device.working)), device.activeSlot));
}

/**
 * What entering a state promises of the device, checked on the device itself at that moment.
 *
 * Source: the run's executable model, invariants S1 to S8 (S3 and S4's ways out are checked on whole runs).
 */
export function brokenBy(world: World, before: RunState, view: RunView): readonly string[] {
  if (view.state === before) return [];
  const { device, storedAtStart } = world;
  const sides = sidesOf(world);
  const commitSent = factsFrom(world.entries).commitSent;
  const untouched = (values: NativeValues) => holds(values, sides.old) || holds(values, storedAtStart);
  const found: string[] = [];
  const demand = (truth: boolean, sentence: string) => {
    if (!truth) found.push(sentence);
  };
  if (view.state === "kept") {
    demand(holds(device.stored, sides.new), "S1 kept, but non-volatile memory is not all new");
    demand(!device.timerArmed, "S1 kept, but the device timer is armed");
    demand(world.word === "keep", "S8 kept, but the owner's last word was to put back");
  }
  if (view.state === "put-back") {
    demand(holds(device.working, sides.old), "S2 put-back, but working memory is not all old");
    demand(untouched(device.stored), `S2 put-back, but non-volatile memory is not all old (commit sent: ${String(commitSent)})`);
    demand(rasterInEffect(world), "S2 put-back, but the raster out is not the old one");
    demand(!device.timerArmed, "S2 put-back, but the device timer is armed");
    demand(device.activeSlot === 1, "S5 put-back, but another slot is active");
  }
  if (view.state === "called-off") demand(device.counts.writes === Number(storedAtStart[CHANGED.other] !== sides.old[CHANGED.other]), "called off, but something was written");
  if (view.state === "mixed" && !world.timerFired) {
    demand(view.standings.every(({ key, found: value }) => value === device.working[key]), "S4 mixed, with a wrong label");
  }
  if (view.state === "trying") {
    demand(holds(device.working, sides.new) && rasterInEffect(world), "S7 trying begins, but the device does not show all new");
    if (!view.onlyThisPagePutsBack) {
      demand(device.timerArmed ? world.armedOver !== null && untouched(world.armedOver) : untouched(device.working), "S6 trying, and the device alone would not go back to the old values");
    }
  }
  return found;
}
