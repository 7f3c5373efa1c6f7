import { rasterOfSlot } from "@/lib/serial/plan/output-raster";
import { arrivingProblem, backupProblem } from "./ready-problem";
import type { RunCore, Turn } from "./run-core";
import { extendTrial, openByHand, writeForward } from "./run-procedures";
import { readWhole, recall } from "./run-requests";

/** Start: the device is still as the backup has it, or the run is called off; then the plan's steps. */
export async function startWriting(core: RunCore): Promise<Turn> {
  const { session, goal } = core;
  if (session === null) return "rest";
  if (!(await core.record({ kind: "word", word: "keep" }))) return "rest";
  const read = await readWhole(core);
  if (read === null) return "rest";
  const arriving = await arrivingProblem(goal, session);
  if (!arriving.ok) {
    core.lose(arriving.error.message);
    return "rest";
  }
  const problem = backupProblem(goal, read) || arriving.value;
  if (problem !== "") {
    await core.say("called-off", problem);
    return "rest";
  }
  if (core.wantsBack) {
    await core.say("called-off", "Stopped before anything was written.");
    return "rest";
  }
  if (!(await core.say("writing"))) return "rest";
  if (goal.steps.length === 0) return openByHand(core);
  return writeForward(core, goal.steps, goal.driver.definition.memory.deviceTimer !== undefined);
}

/** The slot is one that the plan changes, and what it puts out fits the screen as every raster of the plan does. */
export function mayLookAt(core: RunCore, slot: number): boolean {
  const { changedSlots, driver, allowed, homeSlot } = core.goal;
  if (slot !== homeSlot && !changedSlots.includes(slot)) return false;
  const raster = rasterOfSlot(driver, new Map(Object.entries(core.goal.new)), slot);
  return raster !== null && allowed(raster);
}

/** Recalls a slot of the plan and begins the countdown again. A device timer that has fired is settled by a whole read. */
export async function lookAt(core: RunCore, slot: number): Promise<Turn> {
  core.endCountdown();
  const raster = rasterOfSlot(core.goal.driver, new Map(Object.entries(core.goal.new)), slot);
  const outcome = await recall(core, slot, "forward", raster);
  if (outcome === "lost") return "rest";
  if (outcome === "done") core.lookedAt.add(slot);
  if (core.wantsBack) return "put-back";
  const extended = await extendTrial(core);
  if (extended !== "done") return extended === "lost" ? "rest" : "arrive";
  if (core.wantsBack) return "put-back";
  core.startCountdown();
  return "rest";
}
