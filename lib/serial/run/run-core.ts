import type { Clock } from "@/lib/serial/clock";
import type { DeviceIdentity, DeviceSession, WholeRead } from "@/lib/serial/session/types";
import type { AlignStep } from "./align-step";
import { factsAfter, type RunFacts } from "./run-facts";
import { alignedGoal, standingsOf, type RunGoal } from "./run-goal";
import type { JournalEntry, JournalStore, RunState, RunView } from "./types";

type DistributiveOmit<T, K extends PropertyKey> = T extends unknown ? Omit<T, K> : never;
/** A journal entry without what the run itself puts in. */
export type EntryBody = DistributiveOmit<JournalEntry, "number" | "atMs">;

export type RunOptions = {
  readonly goal: RunGoal;
  readonly journal: JournalStore;
  readonly clock: Clock;
  /** 10 to 120 s. */
  readonly countdownSeconds: number;
  /** The device that the backup was taken from: what answers later has to be the same. */
  readonly identity: DeviceIdentity;
};

/** What goes on after a procedure: the next one, or `rest` until the owner, the clock or the port says more. */
export type Turn = "rest" | "try" | "keep" | "put-back" | "arrive";

type Alignment = { readonly underWay: boolean; readonly inFlight: AlignStep | null; readonly waiting: AlignStep | null };

/**
 * The state that the procedures of a run share, and the only doors through which it changes.
 *
 * One act is under way at a time; procedures ask `wantsBack` between any two requests.
 */
export class RunCore {
  /** With what was aligned so far. */
  goal: RunGoal;
  readonly clock: Clock;
  readonly countdownSeconds: number;
  readonly identity: DeviceIdentity;
  session: DeviceSession | null = null;
  facts: RunFacts;
  link: "up" | "lost" = "lost";
  busy = false;
  /** The owner pressed Stop or Put back, or the countdown ended, while requests were under way. */
  wantsBack = false;
  /** The device timer is known to be off: it fired, or was confirmed or disarmed. Not journalled: a reload asks the device. */
  unarmed = false;
  lastRead: WholeRead | null = null;
  /** The slot that was on when the device was last asked. */
  slotOn: number | null = null;
  readonly lookedAt = new Set<number>();
  /** Live alignment: the step whose requests are made, and the one that waits, whose place the next one takes. */
  alignment: Alignment = { underWay: false, inFlight: null, waiting: null };

  private readonly planned: RunGoal;
  private readonly journal: JournalStore;
  private why = "";
  private progress = { done: 0, total: 0 };
  private countdown: { readonly endsAtMs: number; readonly takeBack: () => void } | null = null;
  private readonly listeners = new Set<(view: RunView) => void>();
  private onCountdownEnd: () => void = () => undefined;

  constructor(options: RunOptions, facts: RunFacts) {
    this.planned = options.goal;
    this.goal = alignedGoal(options.goal, facts.aligned);
    this.clock = options.clock;
    this.countdownSeconds = options.countdownSeconds;
    this.identity = options.identity;
    this.journal = options.journal;
    this.facts = facts;
  }

  get state(): RunState {
    return this.facts.state;
  }

  get view(): RunView {
    const open = this.state === "mixed" || this.state === "unconfirmed";
    return {
      state: this.state,
      busy: this.busy,
      progress: this.progress,
      link: this.link,
      why: this.why,
      countdown: this.countdown && { endsAtMs: this.countdown.endsAtMs, seconds: this.countdownSeconds },
      notLookedAt: this.goal.changedSlots.filter((slot) => !this.lookedAt.has(slot)),
      onlyThisPagePutsBack: this.goal.driver.definition.memory.deviceTimer === undefined || this.unarmed,
      commitMayHaveLeft: this.facts.commitSent,
      lastWriteAtMs: this.facts.lastWriteAtMs,
      standings: open ? standingsOf(this.goal, this.lastRead) : [],
    };
  }

  /** The goal before the last step of live alignment, which may never have left; null where there was none. */
  get goalBefore(): RunGoal | null {
    return this.facts.alignedBefore && alignedGoal(this.planned, this.facts.alignedBefore);
  }

  onView(listener: (view: RunView) => void): () => void {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  }

  emit(): void {
    const { view } = this;
    for (const listener of [...this.listeners]) listener(view);
  }

  expect(total: number): void {
    this.progress = { done: 0, total };
    this.emit();
  }

  advance(): void {
    const { done, total } = this.progress;
    this.progress = { done: Math.min(done + 1, total), total };
    this.emit();
  }

  /** Appends an entry. False: it cannot be kept, and nothing may be sent. */
  async record(body: EntryBody, number = this.facts.nextNumber): Promise<boolean> {
    const entry = { ...body, number, atMs: this.clock.wallMs() };
    this.facts = factsAfter(this.facts, entry);
    if (entry.kind === "align") this.goal = alignedGoal(this.planned, this.facts.aligned);
    try {
      await this.journal.append(entry);
      return true;
    } catch (cause) {
      this.lose(`The journal cannot be written: ${cause instanceof Error ? cause.message : String(cause)}`);
      return false;
    }
  }

  /** Moves to a state: shown at once, then journalled. */
  async say(state: RunState, why = ""): Promise<boolean> {
    this.why = why;
    if (state !== "trying") this.endCountdown();
    this.facts = { ...this.facts, state };
    this.emit();
    return this.record({ kind: "state", state, ...(why === "" ? {} : { why }) });
  }

  lose(cause: string): void {
    this.link = "lost";
    this.why = cause;
    this.endCountdown();
    this.emit();
  }

  setCountdownEnd(handler: () => void): void {
    this.onCountdownEnd = handler;
  }

  startCountdown(): void {
    this.endCountdown();
    const ms = this.countdownSeconds * 1000;
    const takeBack = this.clock.after(ms, () => this.onCountdownEnd());
    this.countdown = { endsAtMs: this.clock.nowMs() + ms, takeBack };
    this.emit();
  }

  endCountdown(): void {
    this.countdown?.takeBack();
    this.countdown = null;
  }

  /** The countdown has run out by the clock, whether or not a sleeping page's timer said so. */
  get countdownOver(): boolean {
    return this.countdown === null || this.clock.nowMs() >= this.countdown.endsAtMs;
  }
}
