import type { NativeValues } from "@/lib/serial/native";
import { reconcileJournals } from "./reconcile-journals";
import type { JournalEntry, OwnerWord, RunState } from "./types";

/** What the journal proves about a run, whoever reads it. */
export type RunFacts = {
  readonly state: RunState;
  readonly nextNumber: number;
  /** A commit left the page, whatever became of it. */
  readonly commitSent: boolean;
  /** `bootCount` of a whole read made after the last write; any write makes it void. */
  readonly bootCount: number | null;
  /** The owner stated a switch-off after the last write and commit. */
  readonly statedCycle: boolean;
  readonly word: OwnerWord | null;
  /** Wall clock of the last write or commit. */
  readonly lastWriteAtMs: number | null;
  /** The output may be muted: a mute left and no unmute is known to have arrived. */
  readonly muted: boolean;
  /** What was aligned by hand, over the plan's values; and the same before the last step of it, which may never have left. */
  readonly aligned: NativeValues;
  readonly alignedBefore: NativeValues | null;
};

export const FACTS_AT_START: RunFacts = {
  state: "ready",
  nextNumber: 1,
  commitSent: false,
  bootCount: null,
  statedCycle: false,
  word: null,
  lastWriteAtMs: null,
  muted: false,
  aligned: {},
  alignedBefore: null,
};

function afterRequest(facts: RunFacts, entry: JournalEntry & { kind: "request" }): RunFacts {
  switch (entry.request) {
    case "write":
      return { ...facts, bootCount: null, statedCycle: false, lastWriteAtMs: entry.atMs };
    case "commit":
      return { ...facts, commitSent: true, statedCycle: false, lastWriteAtMs: entry.atMs };
    case "mute": {
      const unmuted = entry.muteOn === false && entry.outcome === "done";
      return { ...facts, muted: !unmuted && (facts.muted || entry.muteOn !== false) };
    }
    case "recall":
    case "arm":
    case "extend":
    case "confirm":
    case "disarm":
      return facts;
  }
}

/** The facts after one more entry. */
export function factsAfter(facts: RunFacts, entry: JournalEntry): RunFacts {
  const next = { ...facts, nextNumber: Math.max(facts.nextNumber, entry.number + 1) };
  switch (entry.kind) {
    case "request":
      return afterRequest(next, entry);
    case "state":
      return { ...next, state: entry.state };
    case "word":
      return { ...next, word: entry.word };
    case "boot-count":
      return { ...next, bootCount: entry.bootCount };
    case "stated-cycle":
      return { ...next, statedCycle: true };
    case "align": {
      const values = Object.fromEntries(entry.values.map(({ key, value }) => [key, value]));
      return { ...next, aligned: { ...next.aligned, ...values }, alignedBefore: next.aligned };
    }
  }
}

/** The facts of a whole journal, in any order and with any number of entries a step. */
export function factsFrom(entries: readonly JournalEntry[]): RunFacts {
  return reconcileJournals(entries).reduce(factsAfter, FACTS_AT_START);
}
