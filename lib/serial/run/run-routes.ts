import type { NativeValues } from "@/lib/serial/native";
import { deviceImage, type DeviceImage } from "@/lib/serial/plan/device-image";
import { directRoute, findRoute, type Destination } from "@/lib/serial/plan/find-route";
import type { PlanStep } from "@/lib/serial/plan/types";
import type { WholeRead } from "@/lib/serial/session/types";
import { differingKeys, type RunGoal } from "./run-goal";

/** The device as a whole read shows it, held to the settings that a run may write. */
function imageOf(goal: RunGoal, read: WholeRead): DeviceImage {
  return deviceImage(goal.driver, { values: read.values, activeSlot: read.activeSlot, rasterOut: read.rasterOut });
}

function pick(values: NativeValues, keys: readonly string[]): NativeValues {
  return Object.fromEntries(keys.flatMap((key) => (values[key] === undefined ? [] : [[key, values[key]]])));
}

/**
 * The steps from what a whole read found to one side of a run: only what differs, the slot of the start on at the end.
 *
 * An order with an allowed raster at every moment where there is one: the plan's own way, backwards or forwards, is
 * one for every state on it, so only a device that something else has changed can be without. That one goes straight.
 * @param muted the output may be muted since an earlier step
 */
export function routeTo(goal: RunGoal, side: "new" | "old", read: WholeRead, muted: boolean): readonly PlanStep[] {
  const from = imageOf(goal, read);
  const wanted = goal[side];
  const to: Destination = {
    values: pick(wanted, differingKeys(wanted, read)),
    activeSlot: goal.homeSlot,
    allowed: goal.allowed,
  };
  const route = findRoute(from, to, muted ? [5, 1] : [1, 3, 5]);
  return route?.steps ?? directRoute(from, to);
}
