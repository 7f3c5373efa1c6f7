import type { NewPlan } from "@/lib/contracts/plan";
import { say, sentenceOf, type BenchCore } from "@/components/bench/store/bench-core";
import { backUp } from "@/components/bench/store/reading";
import { planFor } from "@/components/bench/store/review";
import { startRun } from "@/components/bench/store/run-control";
import type { BenchReview } from "@/components/bench/store/types";
import type { CheckedPlan, PlanInput } from "@/lib/serial/plan/types";

function serverTarget(review: BenchReview, input: PlanInput): NewPlan["target"] | null {
  const { target } = review;
  if (target.kind === "restore") return target.backupId === null ? null : { kind: "restore", backupId: target.backupId };
  if (target.kind === "edits") return { kind: "edits", edits: [...target.patches], native: [...target.native] };
  if (target.kind === "profile" && target.revisionId !== null && !target.isAltered) return { kind: "revision", revisionId: target.revisionId, patches: [...target.patches] };
  return input.target.kind === "profile" ? { kind: "document", document: input.target.document } : null;
}

/** Stores the plan and opens its run on the server, which checks and plans again. Null: it refused; the notice says why. */
async function openOnServer(core: BenchCore, review: BenchReview, { input, hash }: CheckedPlan, backupId: string): Promise<string | null> {
  const { screen } = core.store.getState();
  const target = serverTarget(review, input);
  const named = screen.kind === "known" ? (screen.id === null ? null : { id: screen.id }) : ("accepted-unknown" as const);
  if (target === null || named === null) {
    say(core, "halt", "This plan rests on something that is in this page alone. Save the screen under Screens first.");
    return null;
  }
  try {
    const plan = await core.around.server.storePlan({ backupId, target, leftOut: [...input.leftOut], screen: named, acknowledged: [...input.acknowledged], hash });
    const run = await core.around.server.createRun({ planId: plan.id, countdownSeconds: review.countdownSeconds, holder: core.around.tabId }, plan.hash);
    return run.id;
  } catch (error) {
    say(core, "halt", `Nothing was written. ${sentenceOf(error)}`);
    return null;
  }
}

/**
 * Back up, store the plan that was reviewed, open its run, and start it.
 *
 * The backup is taken fresh: where the device no longer is as it was reviewed, the plan is shown again instead.
 */
export async function backUpAndTry(core: BenchCore): Promise<void> {
  const reviewed = core.store.getState().review;
  const plan = reviewed?.planned.plan;
  if (!reviewed || !plan) return;
  const backup = await backUp(core, "before-run");
  if (!backup) return;
  const fresh = planFor(core, reviewed)?.plan ?? null;
  if (!fresh || fresh.hash !== plan.hash) {
    say(core, "halt", "The device has changed since this plan was reviewed. Look through it again.");
    return;
  }
  const isStored = core.store.getState().device?.stored !== null;
  const { countdownSeconds } = reviewed;
  if (!isStored) return startRun(core, { plan: fresh, runId: null, countdownSeconds });
  const runId = backup.id === null ? null : await openOnServer(core, reviewed, fresh, backup.id);
  if (runId !== null) await startRun(core, { plan: fresh, runId, countdownSeconds });
}
