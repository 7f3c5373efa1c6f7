import type { PlanStep } from "@/lib/serial/plan/types";
import type { RunCore, Turn } from "./run-core";
import { judgeRead, type Judgement } from "./run-goal";
import { commit, mute, perform, readWhole, timer, type StepOutcome } from "./run-requests";
import { routeTo } from "./run-routes";

/** Time beyond the countdown before the device puts the old values back by itself: the page is to be first. */
const TIMER_MARGIN_SECONDS = 10;

const hasTimer = (core: RunCore) => core.goal.driver.definition.memory.deviceTimer !== undefined;
/** The timer may be running: it exists, and nothing says that it fired or was stopped. */
const mayBeArmed = (core: RunCore) => hasTimer(core) && !core.unarmed;
const isVolatile = (core: RunCore) => core.goal.driver.definition.memory.volatileWrites;
const canAskCommitted = (core: RunCore) => core.goal.driver.definition.status.committed !== undefined;

const trialSeconds = (core: RunCore) => core.countdownSeconds + TIMER_MARGIN_SECONDS;
const writingSeconds = (core: RunCore) => core.goal.stepsSeconds + core.goal.wholeReadSeconds;

export async function readAndJudge(core: RunCore): Promise<Judgement | null> {
  const { facts } = core;
  const read = await readWhole(core);
  // Judged by the facts before the read: the count it may just have journalled is its own.
  return read && judgeRead(core.goal, read, { ...core.facts, bootCount: facts.bootCount });
}

/** Steps in order, with a way out between any two. `restarted`: the device is not as it was left, so it is read whole. */
export async function follow(core: RunCore, steps: readonly PlanStep[], direction: "forward" | "back"): Promise<StepOutcome | "stopped"> {
  for (const step of steps) {
    if (core.wantsBack && direction === "forward") return "stopped";
    if (step.kind === "recall" && direction === "forward") {
      // A device timer that fired among the writes leaves half of them: what a recall would put out then, no plan has checked.
      const stands = await extendTrial(core, writingSeconds(core));
      if (stands !== "done") return stands === "lost" ? "lost" : "restarted";
    }
    const outcome = await perform(core, step, direction);
    if (outcome !== "done") return outcome;
    core.advance();
  }
  return "done";
}

/** A muted output is let out again before a run comes to rest on one side: the last unmute may have been lost. */
async function unmute(core: RunCore): Promise<StepOutcome> {
  return core.facts.muted ? mute(core, false, "back") : "done";
}

/** Ends by the owner's hand: neither side was reached. */
async function settleMixed(core: RunCore, why: string): Promise<Turn> {
  await core.say("mixed", why);
  return "rest";
}

/**
 * `writing`: arms the device timer where nothing stands in its way, takes the steps, and reads the whole device.
 *
 * Ends in `try` with everything new, in `keep` where a commit may have left before, else in `put-back`.
 */
export async function writeForward(core: RunCore, steps: readonly PlanStep[], arm: boolean): Promise<Turn> {
  core.expect(steps.length);
  if (arm) {
    const armed = await timer(core, "arm", writingSeconds(core) + trialSeconds(core));
    if (armed === "lost") return "rest";
    if (armed === "refused") return "put-back";
  }
  const outcome = await follow(core, steps, "forward");
  if (outcome === "lost") return "rest";
  if (outcome === "restarted" && !core.wantsBack) return "arrive";
  if (outcome !== "done" || core.wantsBack) return "put-back";
  if ((await unmute(core)) === "lost") return "rest";
  const judged = await readAndJudge(core);
  if (judged === null) return "rest";
  if (!judged.allNew || core.wantsBack) return "put-back";
  return core.facts.commitSent ? "keep" : "try";
}

/** A run that is opened by hand: all is as it was, so the device timer is armed over it, and the trial begins. */
export async function openByHand(core: RunCore): Promise<Turn> {
  if (!hasTimer(core)) return "try";
  const armed = await timer(core, "arm", trialSeconds(core));
  if (armed === "lost") return "rest";
  return armed === "refused" ? "put-back" : "try";
}

/** Gives a device timer that may be armed a whole countdown, and the seconds of requests before it. `refused`: it has fired. */
export async function extendTrial(core: RunCore, requestSeconds = 0): Promise<"done" | "refused" | "lost"> {
  return mayBeArmed(core) ? timer(core, "extend", requestSeconds + trialSeconds(core)) : "done";
}

/** `trying`: begins with all new in place and a whole countdown. A timer that has fired is settled by a whole read. */
export async function beginTrial(core: RunCore): Promise<Turn> {
  const extended = await extendTrial(core);
  if (extended !== "done") return extended === "lost" ? "rest" : "arrive";
  if (core.wantsBack) return "put-back";
  core.startCountdown();
  await core.say("trying");
  return "rest";
}

/** `keeping`: a whole read, the timer confirmed, one commit; then the proof, which no acknowledgement is. */
export async function keepTrial(core: RunCore): Promise<Turn> {
  if (!(await core.say("keeping"))) return "rest";
  if (mayBeArmed(core) && (await timer(core, "extend", writingSeconds(core) + TIMER_MARGIN_SECONDS)) === "lost") return "rest";
  const first = await readAndJudge(core);
  if (first === null) return "rest";
  if (!first.allNew || core.wantsBack) return "put-back";
  if (hasTimer(core)) {
    const confirmed = await timer(core, "confirm");
    if (confirmed === "lost") return "rest";
    if (confirmed === "refused") {
      const again = await readAndJudge(core);
      if (again === null) return "rest";
      if (!again.allNew) return "put-back";
    }
    if (core.wantsBack) return "put-back";
  }
  if (!isVolatile(core)) {
    await core.say("kept");
    return "rest";
  }
  if ((await commit(core, "forward")) === "lost") return "rest";
  return core.wantsBack ? "put-back" : prove(core);
}

/** What a commit did is asked of the device where it can say; else it shows after a restart. */
async function prove(core: RunCore): Promise<Turn> {
  if (canAskCommitted(core)) return "arrive";
  await core.say("unconfirmed", "The device cannot say what it has stored. Switch it off and on, then read it again.");
  return "rest";
}

/** `putting-back`: from whatever a whole read finds to all old, and proof that it is so. */
export async function putBack(core: RunCore): Promise<Turn> {
  core.wantsBack = false;
  if (!(await core.say("putting-back"))) return "rest";
  const read = await readWhole(core);
  if (read === null) return "rest";
  const steps = routeTo(core.goal, "old", read, core.facts.muted);
  core.expect(steps.length);
  const outcome = await follow(core, steps, "back");
  if (outcome === "lost") return "rest";
  if (outcome === "restarted") return "arrive";
  if (outcome === "failed") {
    const found = await readWhole(core);
    return found === null ? "rest" : settleMixed(core, "The device did not take a value back.");
  }
  if ((await unmute(core)) === "lost") return "rest";
  if (hasTimer(core) && (await timer(core, "disarm")) === "lost") return "rest";
  const judged = await readAndJudge(core);
  if (judged === null) return "rest";
  if (!judged.allOld || !judged.home) return settleMixed(core, "The device holds other values than before, although it took them.");
  if (judged.proved) {
    await core.say("put-back");
    return "rest";
  }
  if ((await commit(core, "back")) === "lost") return "rest";
  return prove(core);
}

/** All old, in the slot of the start, and proved: nothing may be left armed that could change it again. */
async function arriveOld(core: RunCore): Promise<Turn> {
  if (mayBeArmed(core)) return (await timer(core, "disarm")) === "lost" ? "rest" : "arrive";
  if (core.facts.muted && (await unmute(core)) === "lost") return "rest";
  await core.say("put-back");
  return "rest";
}

/** The last step of live alignment never left, by a whole read: what was tried before it is tried again. */
async function takeBackLastStep(core: RunCore): Promise<Turn | null> {
  const { goalBefore, lastRead, goal, facts } = core;
  if (goalBefore === null || lastRead === null || facts.commitSent || !judgeRead(goalBefore, lastRead, facts).allNew) return null;
  const values = Object.entries(goalBefore.new).flatMap(([key, value]) => (goal.new[key] === value ? [] : [{ key, value }]));
  if (!(await core.record({ kind: "align", values }))) return "rest";
  return facts.muted && (await unmute(core)) === "lost" ? "rest" : "try";
}

/** After a loss, a restart, a device timer, a commit, or when the owner asks: what a whole read means. */
export async function arrive(core: RunCore): Promise<Turn> {
  const judged = await readAndJudge(core);
  if (judged === null) return "rest";
  if (core.wantsBack) return "put-back";
  const { allNew, allOld, home, proved } = judged;
  const { commitSent, word } = core.facts;
  if (allOld && home && proved) return arriveOld(core);
  if (allNew && !commitSent) return core.facts.muted && (await unmute(core)) === "lost" ? "rest" : "try";
  const takenBack = allOld || allNew ? null : await takeBackLastStep(core);
  if (takenBack !== null) return takenBack;
  if ((allOld || allNew) && !proved) {
    await core.say("unconfirmed", "What the device shows may not be what it has stored. Switch it off and on, then read it again.");
    return "rest";
  }
  if (allNew && word === "keep") {
    await core.say("kept");
    return "rest";
  }
  return settleMixed(core, core.state === "putting-back" ? "The device holds other values than before." : "The device holds some of the new values, or others.");
}

/** `writing` again from a run that reached neither side: only what is not new yet. */
export async function finishForward(core: RunCore): Promise<Turn> {
  if (!(await core.say("writing"))) return "rest";
  const judged = await readAndJudge(core);
  if (judged === null || core.lastRead === null) return "rest";
  const steps = routeTo(core.goal, "new", core.lastRead, core.facts.muted);
  return writeForward(core, steps, hasTimer(core) && judged.allOld && !core.facts.commitSent);
}
