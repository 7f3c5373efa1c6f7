import { fail, ok, type Result } from "@/lib/result";
import type { Clock } from "@/lib/serial/clock";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";
import { isCheckedPlan } from "@/lib/serial/plan/plan-changes";
import type { CheckedPlan } from "@/lib/serial/plan/types";
import type { DeviceIdentity, DeviceSession } from "@/lib/serial/session/types";
import { lookAt, mayLookAt, startWriting } from "./run-acts";
import { RunCore, type Turn } from "./run-core";
import { FACTS_AT_START, factsFrom, type RunFacts } from "./run-facts";
import { goalOf } from "./run-goal";
import { arrive, beginTrial, finishForward, keepTrial, putBack } from "./run-procedures";
import { FINAL_RUN_STATES, type JournalEntry, type JournalStore, type RunActRefusal, type RunState, type RunView } from "./types";

export const COUNTDOWN_SECONDS = { min: 10, default: 30, max: 120 } as const;

/** Turns one act can take: arriving may be sent back to arriving by a timer that fired, once for each of its orders. */
const MAX_TURNS = 16;

export type RunSetup = {
  /** Made by `planChanges`, here and now: anything else is refused by a throw. */
  readonly plan: CheckedPlan;
  readonly journal: JournalStore;
  readonly clock: Clock;
  /** Whole seconds, 10 to 120; 30 where it is left out. */
  readonly countdownSeconds?: number | undefined;
  /** Of the device that the plan's backup was taken from. */
  readonly identity: DeviceIdentity;
};

type Act = Promise<Result<void, RunActRefusal>>;

/**
 * One execution of a plan. Acts settle when the run rests again: waiting for the owner, at an end, or lost.
 *
 * Which act belongs to which state: `start` ready; `stop` writing, keeping, trying; `keep`, `look` trying; `putBack`
 * trying, unconfirmed, mixed; `finish`, `readAgain`, `leave` unconfirmed, mixed; `stateCycled` unconfirmed. `readAgain`
 * also takes up a run that lost the device's voice but not its port.
 */
export type Run = {
  readonly view: RunView;
  onView(listener: (view: RunView) => void): () => void;
  start(): Act;
  stop(): Act;
  keep(): Act;
  putBack(): Act;
  finish(): Act;
  /** Recalls a slot of the plan to look at it; the countdown begins again. */
  look(slot: number): Act;
  readAgain(): Act;
  /** The owner states that the device was switched off and on after `view.lastWriteAtMs`. */
  stateCycled(): Act;
  leave(): Act;
  /** Goes on with a session to the same device, after a loss, a reload or a restart. */
  resume(session: DeviceSession): Act;
  /** Lets go of the session, the clock and the listeners; the journal keeps the run. */
  release(): void;
};

const OPEN_ENDED: readonly RunState[] = ["unconfirmed", "mixed"];
const TURNS: Readonly<Record<Exclude<Turn, "rest">, (core: RunCore) => Promise<Turn>>> = {
  try: beginTrial,
  keep: keepTrial,
  "put-back": putBack,
  arrive,
};

async function takeTurns(core: RunCore, first: Turn): Promise<void> {
  let turn = first;
  for (let taken = 0; turn !== "rest"; taken += 1) {
    if (taken === MAX_TURNS) throw new Error("A run did not come to rest");
    turn = await TURNS[turn](core);
  }
}

function sameDevice(a: DeviceIdentity, b: DeviceIdentity): boolean {
  return a.maker === b.maker && a.model === b.model && a.serialNumber === b.serialNumber;
}

class LiveRun implements Run {
  private readonly core: RunCore;
  private unsubscribe: () => void = () => undefined;
  /** The act under way; others wait for it or are refused. */
  private underWay: Promise<void> | null = null;

  constructor(core: RunCore) {
    this.core = core;
    core.setCountdownEnd(() => void this.goBack());
  }

  get view(): RunView {
    return this.core.view;
  }

  onView(listener: (view: RunView) => void): () => void {
    return this.core.onView(listener);
  }

  start(): Act {
    return this.act(["ready"], () => startWriting(this.core));
  }

  stop(): Act {
    const { core } = this;
    if (core.state === "ready" && core.busy) {
      core.wantsBack = true;
      return this.settled();
    }
    return this.goBackFrom(["writing", "keeping", "trying"]);
  }

  putBack(): Act {
    return this.goBackFrom(["trying", "writing", "keeping", ...OPEN_ENDED]);
  }

  async keep(): Act {
    const { core } = this;
    if (core.state === "trying" && core.link === "up" && !core.busy && core.countdownOver) return fail("too-late");
    return this.act(["trying"], async () => {
      core.endCountdown();
      return (await core.record({ kind: "word", word: "keep" })) ? "keep" : "rest";
    });
  }

  finish(): Act {
    return this.act(OPEN_ENDED, async () => {
      if (!(await this.core.record({ kind: "word", word: "keep" }))) return "rest";
      return finishForward(this.core);
    });
  }

  async look(slot: number): Act {
    const { core } = this;
    if (core.state === "trying" && core.link === "up") {
      if (!core.busy && core.countdownOver) return fail("too-late");
      if (!mayLookAt(core, slot)) return fail("not-allowed");
    }
    return this.act(["trying"], () => lookAt(core, slot));
  }

  async readAgain(): Act {
    const { core } = this;
    const silent = core.link === "lost" && core.session?.state.name === "ready";
    if (silent && core.session !== null) return this.resume(core.session);
    return this.act(OPEN_ENDED, () => Promise.resolve("arrive"));
  }

  stateCycled(): Act {
    return this.act(["unconfirmed"], async () => ((await this.core.record({ kind: "stated-cycle" })) ? "arrive" : "rest"));
  }

  async leave(): Act {
    const { core } = this;
    if (!OPEN_ENDED.includes(core.state)) return fail("wrong-state");
    if (core.busy) return fail("busy");
    await core.say("left");
    this.release();
    return ok(undefined);
  }

  async resume(session: DeviceSession): Act {
    const { core } = this;
    if (FINAL_RUN_STATES.includes(core.state)) return fail("wrong-state");
    if (this.underWay) await this.underWay;
    const identity = await session.identify();
    if (!identity.ok) return fail("link-lost");
    if (!sameDevice(identity.value, core.identity)) return fail("other-device");
    this.attach(session);
    if (core.state === "ready") {
      await core.say("called-off", "The link was lost before anything was written.");
      this.release();
      return ok(undefined);
    }
    return this.act(["writing", "trying", "keeping", "putting-back", ...OPEN_ENDED], () => Promise.resolve("arrive"));
  }

  release(): void {
    this.unsubscribe();
    this.unsubscribe = () => undefined;
    this.core.endCountdown();
  }

  attach(session: DeviceSession): void {
    const { core } = this;
    this.unsubscribe();
    core.session = session;
    core.link = "up";
    core.wantsBack = false;
    this.unsubscribe = session.onState((state) => {
      if (core.session !== session) return;
      if (state.name === "lost") core.lose(state.cause);
      if (state.name === "closed") core.lose("The port was closed.");
    });
    core.emit();
  }

  /** Runs one act to rest. */
  private async act(states: readonly RunState[], first: () => Promise<Turn>): Act {
    const { core } = this;
    if (!states.includes(core.state)) return fail("wrong-state");
    if (core.link === "lost") return fail("link-lost");
    if (core.busy) return fail("busy");
    core.wantsBack = false;
    core.busy = true;
    core.emit();
    this.underWay = first().then((turn) => takeTurns(core, turn)).finally(() => {
      core.busy = false;
      this.underWay = null;
      if (FINAL_RUN_STATES.includes(core.state)) this.release();
      core.emit();
    });
    await this.underWay;
    return ok(undefined);
  }

  private async settled(): Act {
    await this.underWay;
    return ok(undefined);
  }

  private async goBack(): Promise<void> {
    await this.goBackFrom(["trying"]);
  }

  /** The owner's "no", or the countdown's: at once where nothing is under way, else between two requests. */
  private async goBackFrom(states: readonly RunState[]): Act {
    const { core } = this;
    if (!states.includes(core.state)) return fail("wrong-state");
    if (core.link === "lost") return fail("link-lost");
    if (core.busy) {
      core.wantsBack = true;
      if (!(await core.record({ kind: "word", word: "back" }))) return fail("link-lost");
      return this.settled();
    }
    return this.act(states, async () => ((await core.record({ kind: "word", word: "back" })) ? "put-back" : "rest"));
  }
}

function coreOf(setup: RunSetup, facts: RunFacts): RunCore {
  const { plan, journal, clock, identity, countdownSeconds = COUNTDOWN_SECONDS.default } = setup;
  if (!isCheckedPlan(plan)) throw new Error("A run takes only a plan that planChanges made here");
  const { min, max } = COUNTDOWN_SECONDS;
  if (!Number.isInteger(countdownSeconds) || countdownSeconds < min || countdownSeconds > max) {
    throw new RangeError(`A countdown takes ${min} to ${max} whole seconds`);
  }
  const goal = goalOf(plan, compiledDriver(plan.input.driver));
  return new RunCore({ goal, journal, clock, identity, countdownSeconds }, facts);
}

/** A run of a plan over a live session, in state `ready`: nothing is sent before `start`. */
export function createRun(setup: RunSetup & { readonly session: DeviceSession }): Run {
  const run = new LiveRun(coreOf(setup, FACTS_AT_START));
  run.attach(setup.session);
  return run;
}

/** A run taken up from its journal, as it was when the page went away; `resume` gives it a session. */
export function restoreRun(setup: RunSetup & { readonly entries: readonly JournalEntry[] }): Run {
  return new LiveRun(coreOf(setup, factsFrom(setup.entries)));
}
