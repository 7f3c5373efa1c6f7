import { createRun, restoreRun, type Run } from "@/lib/serial/run/create-run";
import { backupContent } from "@/lib/serial/backup/take-backup";
import { rasterOfSlot } from "@/lib/serial/plan/output-raster";
import { planChanges } from "@/lib/serial/plan/plan-changes";
import { reconcileJournals } from "@/lib/serial/run/reconcile-journals";
import { FINAL_RUN_STATES, type JournalEntry, type RunActRefusal } from "@/lib/serial/run/types";
import type { CheckedPlan } from "@/lib/serial/plan/types";
import type { Result } from "@/lib/result";
import { ApiProblem } from "@/components/ui/api";
import { createJournal, type BenchJournal } from "@/components/bench/store/journal";
import { dropKeptRun, keptRunKey, saveKeptRun, type KeptRun } from "@/components/bench/store/kept-run";
import { say, type BenchCore } from "@/components/bench/store/bench-core";
import { backUp, readDevice } from "@/components/bench/store/reading";

const REFUSALS: Record<RunActRefusal, string> = {
  "wrong-state": "The run has moved on; this no longer applies.",
  busy: "Something else is under way. Try again in a moment.",
  "too-late": "The countdown has ended, so the former values are put back.",
  "link-lost": "The device is out of reach.",
  "nothing-new": "Nothing differs from what was there before. Put back to end the run.",
  "not-allowed": "That slot's raster does not fit the screen.",
  "other-device": "Another device answers than the one that this run began with. Nothing was sent to it.",
};

/** Takes the lock that keeps two tabs from one device's run. False: another tab has it. */
export async function takeHold(core: BenchCore, name: string): Promise<boolean> {
  const { locks } = core.around;
  if (!locks || core.releaseHold) return true;
  return new Promise<boolean>((resolve) => {
    void locks.request(name, { ifAvailable: true }, (lock) => {
      resolve(lock !== null);
      return lock === null ? undefined : new Promise<void>((release) => { core.releaseHold = release; });
    });
  });
}

function letGo(core: BenchCore): void {
  core.releaseHold?.();
  core.releaseHold = null;
}

function runKey(core: BenchCore): string {
  const device = core.store.getState().device;
  return keptRunKey(device?.driver.slug ?? "", device?.identity.serialNumber);
}

/** A browser tab's delivery of the journal. What the server will never take is not sent again. */
function delivery(core: BenchCore, runId: string, hasHold: boolean): (entries: readonly JournalEntry[]) => Promise<void> {
  let isHeld = hasHold;
  return async (entries) => {
    try {
      // The server was away when this run was taken up: this browser has its lock and its journal, so it is ours.
      if (!isHeld) await core.around.server.takeHold(runId, core.around.tabId, true);
      isHeld = true;
      await core.around.server.appendSteps(runId, { holder: core.around.tabId, entries: [...entries] as never });
    } catch (error) {
      const status = error instanceof ApiProblem ? error.problem.status : 0;
      if (status === 0 || status === 429 || status >= 500) throw error;
      say(core, "halt", `The server no longer takes this run's journal: ${error instanceof Error ? error.message : ""} This browser keeps it.`);
    }
  };
}

function journalOf(core: BenchCore, kept: KeptRun, hasHold = true): BenchJournal {
  const key = runKey(core);
  return createJournal({
    clock: core.around.clock, entries: kept.entries,
    keep: (entries) => saveKeptRun(core.around.storage, key, { ...kept, entries }),
    deliver: kept.runId === null ? undefined : delivery(core, kept.runId, hasHold),
  });
}

/** What the device holds while new values are tried: every one was read back before the trial began. */
function showTried(core: BenchCore, plan: CheckedPlan): void {
  const { driver } = core.line ?? {};
  const { reading, device } = core.store.getState();
  if (!driver || !reading || !device) return;
  const { backup } = plan.input;
  const values = { ...backup.values, ...Object.fromEntries(plan.changes.map(({ key, planned }) => [key, planned])) };
  const content = backupContent(driver, { values, unreadable: backup.unreadable }, device.identity.firmware);
  core.store.setState({ edits: [], nativeEdits: [], reading: { ...reading, content, activeSlot: plan.activeSlot, rasterOut: plan.rasterAfter } });
}

/** Shows the slot that the trial looks at now. */
export async function lookAt(core: BenchCore, slot: number): Promise<void> {
  await act(core, (run) => run.look(slot));
  const { reading, run } = core.store.getState();
  const { driver } = core.line ?? {};
  if (!driver || !reading || run?.view.state !== "trying" || run.view.notLookedAt.includes(slot)) return;
  core.store.setState({ reading: { ...reading, activeSlot: slot, rasterOut: rasterOfSlot(driver, new Map(Object.entries(reading.content.values)), slot) } });
}

function show(core: BenchCore, run: Run, plan: CheckedPlan, journal: BenchJournal): void {
  core.store.setState((state) => ({
    activity: FINAL_RUN_STATES.includes(run.view.state) ? (state.activity === "running" ? "idle" : state.activity) : "running",
    run: {
      view: run.view, journal: journal.entries, changeCount: plan.changes.length, changedSlots: plan.changedSlots, notice: null,
      storesAtOnce: !plan.input.driver.memory.volatileWrites,
    },
  }));
}

/** After the last word: the lock goes, the device is read, and a kept run ends in a new backup. */
async function afterEnd(core: BenchCore, run: Run, kept: KeptRun, journal: BenchJournal): Promise<void> {
  core.run = null;
  letGo(core);
  dropKeptRun(core.around.storage, runKey(core));
  core.store.setState({ edits: [], nativeEdits: [], review: null });
  if (run.view.state === "kept") {
    const backup = await backUp(core, "after-run");
    if (backup?.id && kept.runId !== null) {
      await journal.settled();
      await core.around.server.closeRun(kept.runId, backup.id).catch((error: unknown) => say(core, "halt", `The new backup is stored, but not yet joined to the run: ${String(error)}`));
    }
  } else {
    await readDevice(core);
  }
}

/** The server takes a holder that is silent for 30 s for gone. */
const HEARTBEAT_MS = 10_000;

/** Tells the server that this tab still holds the run, while it does; gives the run up where another browser took it over. */
function keepHold(core: BenchCore, run: Run, runId: string): void {
  const beat = async () => {
    if (core.run !== run) return;
    try {
      await core.around.server.takeHold(runId, core.around.tabId, false);
    } catch (error) {
      if (error instanceof ApiProblem && error.problem.code === "held" && core.run === run) return giveUp(core, run);
    }
    core.around.clock.after(HEARTBEAT_MS, () => void beat());
  };
  core.around.clock.after(HEARTBEAT_MS, () => void beat());
}

function giveUp(core: BenchCore, run: Run): void {
  core.run = null;
  run.release();
  letGo(core);
  core.store.setState({ run: null, activity: "idle" });
  say(core, "halt", "Another browser has taken this run over. Go on there: nothing more is sent from here.");
}

function follow(core: BenchCore, run: Run, plan: CheckedPlan, kept: KeptRun, journal: BenchJournal): void {
  core.run = run;
  if (kept.runId !== null) keepHold(core, run, kept.runId);
  show(core, run, plan, journal);
  let hasEnded = false;
  let isTried = false;
  run.onView((view) => {
    show(core, run, plan, journal);
    if (view.state === "trying" && !isTried) showTried(core, plan);
    isTried = view.state === "trying";
    if (!hasEnded && FINAL_RUN_STATES.includes(view.state) && !view.busy) {
      hasEnded = true;
      void afterEnd(core, run, kept, journal);
    }
  });
}

export type StartRun = { readonly plan: CheckedPlan; readonly runId: string | null; readonly countdownSeconds: number };

/** Starts the run of a plan. The page shows it until its last word. */
export async function startRun(core: BenchCore, { plan, runId, countdownSeconds }: StartRun): Promise<void> {
  const device = core.store.getState().device;
  if (!core.line || !device) return;
  if (!(await takeHold(core, runKey(core)))) {
    say(core, "halt", "Another tab of this browser has a run open on this device. Go on there.");
    return;
  }
  const kept: KeptRun = { runId, hash: plan.hash, countdownSeconds, identity: device.identity, input: plan.input, entries: [] };
  const journal = journalOf(core, kept);
  const run = createRun({ session: core.line.session, plan, journal, clock: core.around.clock, countdownSeconds, identity: device.identity });
  follow(core, run, plan, kept, journal);
  await act(core, (one) => one.start());
}

/**
 * Takes up a run that a closed tab, a reload or another browser left open.
 *
 * @param hasHold whether the server knows this tab as the holder; else it is told when it is there again
 * @returns whether it was taken up: it may have come to its end by then, and sees to the device itself
 */
export async function takeUpRun(core: BenchCore, kept: KeptRun, fromServer: readonly JournalEntry[], hasHold: boolean): Promise<boolean> {
  if (!core.line) return false;
  const { definition } = core.line.driver;
  const planned = kept.input.driver;
  if (planned.slug !== definition.slug || planned.version !== definition.version) {
    say(core, "halt", `A run was left open with version ${planned.version} of this driver, and the device is met with version ${definition.version}. Nothing is written. Connect again when the server can be reached.`);
    return false;
  }
  if (!(await takeHold(core, runKey(core)))) {
    say(core, "halt", "Another tab of this browser has a run open on this device. Go on there.");
    return false;
  }
  const { plan } = planChanges(kept.input);
  if (plan?.hash !== kept.hash) {
    letGo(core);
    say(core, "halt", "A run was left open, but its plan can no longer be made the same. Restore a backup to know how the device stands.");
    return false;
  }
  const entries = reconcileJournals(kept.entries, fromServer);
  const whole = { ...kept, entries };
  const journal = journalOf(core, whole, hasHold);
  const run = restoreRun({ plan, journal, clock: core.around.clock, countdownSeconds: kept.countdownSeconds, identity: kept.identity, entries });
  follow(core, run, plan, whole, journal);
  await resumeRun(core);
  return true;
}

/** Goes on with the open run over the session that stands now. Where another device answers, the line is given up. */
export async function resumeRun(core: BenchCore): Promise<void> {
  const { run, line } = core;
  if (!run || !line) return;
  const resumed = await run.resume(line.session);
  if (resumed.ok) return;
  refuse(core, resumed.error);
  if (resumed.error !== "other-device") return;
  await line.session.close();
  core.store.setState({ link: { name: "lost", cause: REFUSALS["other-device"] } });
}

function refuse(core: BenchCore, refusal: RunActRefusal): void {
  core.store.setState((state) => ({ run: state.run && { ...state.run, notice: REFUSALS[refusal] } }));
}

/** One act of the owner; a refusal becomes a sentence beside the run. */
export async function act(core: BenchCore, what: (run: Run) => Promise<Result<void, RunActRefusal>>): Promise<void> {
  const { run } = core;
  if (!run) return;
  const done = await what(run);
  if (!done.ok) refuse(core, done.error);
}
