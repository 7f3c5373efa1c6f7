import { fail, ok, type Result } from "@/lib/result";
import type { Clock } from "@/lib/serial/clock";
import type { NativeValues } from "@/lib/serial/native";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";
import { rasterOfSlot, readOutput, sameOutput } from "@/lib/serial/plan/output-raster";
import { isCheckedPlan } from "@/lib/serial/plan/plan-changes";
import type { CheckedPlan } from "@/lib/serial/plan/types";
import type { DeviceIdentity, DeviceSession } from "@/lib/serial/session/types";
import type { AlignTarget } from "./align-step";
import { LiveRun, type AlignRefusal } from "./live-run";
import { RunCore } from "./run-core";
import { FACTS_AT_START, factsFrom, type RunFacts } from "./run-facts";
import { goalByHand, goalOf, type RunBasis, type RunGoal } from "./run-goal";
import type { JournalEntry, JournalStore, RunActRefusal, RunView } from "./types";

export const COUNTDOWN_SECONDS = { min: 10, default: 30, max: 120 } as const;

/** What a run needs beside what it is to reach. */
type Surroundings = {
  readonly journal: JournalStore;
  readonly clock: Clock;
  /** Whole seconds, 10 to 120; 30 where it is left out. */
  readonly countdownSeconds?: number | undefined;
  /** Of the device that the backup was taken from. */
  readonly identity: DeviceIdentity;
};

export type RunSetup = Surroundings & {
  /** Made by `planChanges`, here and now: anything else is refused by a throw. */
  readonly plan: CheckedPlan;
};

/** A run that is opened by hand, for live alignment alone. `backup`: null where none is stored. */
export type AlignmentSetup = Surroundings & { readonly basis: Omit<RunBasis, "backup"> & { readonly backup: RunBasis["backup"] | null } };

/** `no-backup`: nothing to put back to. `not-in-effect`: what the device puts out is not what its active slot says. */
export type AlignmentRefusal = "no-backup" | "not-in-effect";

type Act = Promise<Result<void, RunActRefusal>>;

/**
 * One execution of a plan. Acts settle when the run rests again: waiting for the owner, at an end, or lost.
 *
 * Which act belongs to which state: `start` ready; `stop` writing, keeping, trying; `keep`, `look`, `align` trying; `putBack`
 * trying, unconfirmed, mixed; `finish`, `readAgain`, `leave` unconfirmed, mixed; `stateCycled` unconfirmed. `readAgain`
 * also takes up a run that lost the device's voice but not its port.
 */
export type Run = {
  readonly view: RunView;
  /** Every setting as it is planned or was last aligned: what Keep would keep. */
  readonly values: NativeValues;
  onView(listener: (view: RunView) => void): () => void;
  start(): Act;
  stop(): Act;
  keep(): Act;
  putBack(): Act;
  finish(): Act;
  /** Recalls a slot of the plan to look at it; the countdown begins again. */
  look(slot: number): Act;
  /**
   * Live alignment: moves settings while they are tried, checked step by step, and begins the countdown again. One step is made
   * at a time and one waits at most, whose place the next target takes, with what the waiting one named and it does not.
   * Settles when the run rests. On a device without trial memory the owner has to have accepted that each step is stored.
   */
  align(target: AlignTarget, options?: { readonly storesAtOnceAccepted?: boolean }): Promise<Result<void, AlignRefusal>>;
  readAgain(): Act;
  /** The owner states that the device was switched off and on after `view.lastWriteAtMs`. */
  stateCycled(): Act;
  leave(): Act;
  /** Goes on with a session to the same device, after a loss, a reload or a restart. */
  resume(session: DeviceSession): Act;
  /** Lets go of the session, the clock and the listeners; the journal keeps the run. */
  release(): void;
};

function coreOf(surroundings: Surroundings, goal: RunGoal, facts: RunFacts): RunCore {
  const { journal, clock, identity, countdownSeconds = COUNTDOWN_SECONDS.default } = surroundings;
  const { min, max } = COUNTDOWN_SECONDS;
  if (!Number.isInteger(countdownSeconds) || countdownSeconds < min || countdownSeconds > max) {
    throw new RangeError(`A countdown takes ${min} to ${max} whole seconds`);
  }
  return new RunCore({ goal, journal, clock, identity, countdownSeconds }, facts);
}

function planCore(setup: RunSetup, facts: RunFacts): RunCore {
  if (!isCheckedPlan(setup.plan)) throw new Error("A run takes only a plan that planChanges made here");
  return coreOf(setup, goalOf(setup.plan), facts);
}

/** A run of a plan over a live session, in state `ready`: nothing is sent before `start`. */
export function createRun(setup: RunSetup & { readonly session: DeviceSession }): Run {
  const run = new LiveRun(planCore(setup, FACTS_AT_START));
  run.attach(setup.session);
  return run;
}

/** A run taken up from its journal, as it was when the page went away; `resume` gives it a session. */
export function restoreRun(setup: RunSetup & { readonly entries: readonly JournalEntry[] }): Run {
  return new LiveRun(planCore(setup, factsFrom(setup.entries)));
}

function alignmentCore(setup: AlignmentSetup, facts: RunFacts): Result<RunCore, AlignmentRefusal> {
  const { backup, ...rest } = setup.basis;
  if (backup === null) return fail("no-backup");
  const driver = compiledDriver(rest.driver);
  const out = readOutput(driver, rest.rasterOut);
  const inEffect = out === undefined || sameOutput(out, rasterOfSlot(driver, new Map(Object.entries(backup.values)), rest.activeSlot));
  return inEffect ? ok(coreOf(setup, goalByHand({ ...rest, backup }), facts)) : fail("not-in-effect");
}

/**
 * A run without a plan, for live alignment, in state `ready`. `start` compares the device with the backup, as every run does,
 * and leads to `trying` with nothing changed; the first step of `align` is its first write.
 */
export function createAlignment(setup: AlignmentSetup & { readonly session: DeviceSession }): Result<Run, AlignmentRefusal> {
  const core = alignmentCore(setup, FACTS_AT_START);
  if (!core.ok) return core;
  const run = new LiveRun(core.value);
  run.attach(setup.session);
  return ok(run);
}

/** A run without a plan taken up from its journal; `resume` gives it a session. */
export function restoreAlignment(setup: AlignmentSetup & { readonly entries: readonly JournalEntry[] }): Result<Run, AlignmentRefusal> {
  const core = alignmentCore(setup, factsFrom(setup.entries));
  return core.ok ? ok(new LiveRun(core.value)) : core;
}
