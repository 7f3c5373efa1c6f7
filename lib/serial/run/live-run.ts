import { fail, ok, type Result } from "@/lib/result";
import type { NativeValues } from "@/lib/serial/native";
import type { DeviceIdentity, DeviceSession } from "@/lib/serial/session/types";
import { alignStep, type AlignProblem, type AlignTarget } from "./align-step";
import { lookAt, mayLookAt, startWriting } from "./run-acts";
import { takeAlignment } from "./run-align";
import type { RunCore, Turn } from "./run-core";
import { changesNothing } from "./run-goal";
import { arrive, beginTrial, finishForward, keepTrial, putBack } from "./run-procedures";
import { FINAL_RUN_STATES, type RunActRefusal, type RunState, type RunView } from "./types";

/** Turns one act can take: arriving may be sent back to arriving by a timer that fired, once for each of its orders. */
const MAX_TURNS = 16;

type Act = Promise<Result<void, RunActRefusal>>;

/** Why a step of live alignment is not taken. `stores-at-once`: the owner has not accepted that each step is stored. */
export type AlignRefusal = AlignProblem | { readonly code: RunActRefusal | "stores-at-once"; readonly findings: AlignProblem["findings"] };

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

/** A run over a core: which act belongs to which state, and one act at a time. */
export class LiveRun {
  private readonly core: RunCore;
  private unsubscribe: () => void = () => undefined;
  /** The act under way; others wait for it or are refused. */
  private underWay: Promise<void> | null = null;

  constructor(core: RunCore) {
    this.core = core;
    core.setCountdownEnd(() => void this.goBack());
  }

  get values(): NativeValues {
    return this.core.goal.new;
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
    if (core.state === "trying" && !core.busy && changesNothing(core.goal)) return fail("nothing-new");
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

  async align(target: AlignTarget, options: { readonly storesAtOnceAccepted?: boolean } = {}): Promise<Result<void, AlignRefusal>> {
    const refused = (code: AlignRefusal["code"]) => fail({ code, findings: [] });
    const { core } = this;
    const { underWay, inFlight, waiting } = core.alignment;
    if (core.state !== "trying") return refused("wrong-state");
    if (core.link === "lost" || core.slotOn === null) return refused("link-lost");
    if (core.busy && (!underWay || core.wantsBack)) return refused("busy");
    if (!core.busy && core.countdownOver) return refused("too-late");
    if (!core.goal.driver.definition.memory.volatileWrites && options.storesAtOnceAccepted !== true) return refused("stores-at-once");
    const held = inFlight?.values ?? core.goal.new;
    const step = alignStep(core.goal, { held, wanted: waiting?.values ?? held, slotOn: core.slotOn }, target);
    if (!step.ok) return step;
    if (!underWay && step.value === null) return ok(undefined);
    core.alignment = { underWay: true, inFlight, waiting: step.value };
    if (underWay) return this.settled();
    const taken = await this.act(["trying"], () => takeAlignment(core));
    return taken.ok ? taken : refused(taken.error);
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

  private async settled(): Promise<Result<void, never>> {
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

