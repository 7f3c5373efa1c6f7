import type { RunCore, Turn } from "./run-core";
import { extendTrial, follow, readAndJudge } from "./run-procedures";
import { mayHaveRestarted } from "./run-requests";
import type { AlignStep } from "./align-step";

/** Whether the device still holds what is tried: a step on anything else would make a raster that nobody has checked. */
async function stillHolds(core: RunCore): Promise<"yes" | "no" | "lost"> {
  const restarted = await mayHaveRestarted(core);
  if (restarted !== "perhaps") return restarted === "lost" ? "lost" : "yes";
  // A device that counts its starts has told of one; any other has to be read.
  if (core.goal.driver.definition.status.bootCount !== undefined) return "no";
  const slot = core.slotOn;
  const judged = await readAndJudge(core);
  if (judged === null) return "lost";
  return judged.allNew && core.slotOn === slot ? "yes" : "no";
}

/** One step, from the journal to its last read-back: the next target waits, the owner's "no" does not. */
async function takeStep(core: RunCore, step: AlignStep): Promise<Turn | "done"> {
  const extended = await extendTrial(core, step.seconds);
  if (extended !== "done") return extended === "lost" ? "rest" : "arrive";
  const holds = await stillHolds(core);
  if (holds === "lost") return "rest";
  if (core.wantsBack) return "put-back";
  if (holds === "no") return "arrive";
  if (!(await core.record({ kind: "align", values: step.changes }))) return "rest";
  core.expect(step.steps.length);
  const outcome = await follow(core, step.steps, "forward");
  if (outcome === "lost") return "rest";
  if (outcome === "restarted" && !core.wantsBack) return "arrive";
  if (outcome !== "done" || core.wantsBack) return "put-back";
  for (const slot of step.movedSlots) {
    if (slot === core.slotOn) core.lookedAt.add(slot);
    else core.lookedAt.delete(slot);
  }
  return "done";
}

function ended(core: RunCore, turn: Turn): Turn {
  core.alignment = { underWay: false, inFlight: null, waiting: null };
  return turn;
}

/**
 * Takes the step that waits, and each that comes to wait meanwhile; then the countdown begins again.
 *
 * Nothing queues: at most one step waits, and the newest takes its place. It goes on for as long as the owner asks for more.
 */
export async function takeAlignment(core: RunCore): Promise<Turn> {
  core.endCountdown();
  for (;;) {
    const step = core.alignment.waiting;
    if (step !== null) {
      core.alignment = { underWay: true, inFlight: step, waiting: null };
      const turn = await takeStep(core, step);
      if (turn !== "done") return ended(core, turn);
      core.alignment = { ...core.alignment, inFlight: null };
      core.emit();
      continue;
    }
    const extended = await extendTrial(core);
    if (extended !== "done") return ended(core, extended === "lost" ? "rest" : "arrive");
    if (core.wantsBack) return ended(core, "put-back");
    if (core.alignment.waiting !== null) continue;
    // Whoever watches may ask for the next step at this very moment.
    core.startCountdown();
    if (core.alignment.waiting === null) return ended(core, "rest");
    core.endCountdown();
  }
}
