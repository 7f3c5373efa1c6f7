import type { NativeKey, NativeValue, NativeWrite } from "@/lib/serial/native";

/** States of a run; see the design's run model. Final: kept, called-off, put-back, left. */
export type RunState =
  | "ready" | "writing" | "trying" | "keeping" | "kept" | "called-off"
  | "putting-back" | "put-back" | "unconfirmed" | "mixed" | "left";

export const FINAL_RUN_STATES: readonly RunState[] = ["kept", "called-off", "put-back", "left"];

/** What the owner said last: it decides what all-new means after a loss. */
export type OwnerWord = "keep" | "back";

/** One line of the journal. Entries with the same `number` are one step: the later outcome wins. */
export type JournalEntry = {
  readonly number: number;
  readonly atMs: number;
} & (
  | {
      readonly kind: "request";
      readonly direction: "forward" | "back";
      readonly request: "write" | "recall" | "commit" | "arm" | "extend" | "confirm" | "disarm" | "mute";
      readonly slot?: number | undefined;
      /** With `mute`. */
      readonly muteOn?: boolean | undefined;
      readonly old?: readonly NativeWrite[] | undefined;
      readonly new?: readonly NativeWrite[] | undefined;
      /** `leaving` is journalled before the bytes leave; the others when it is known. */
      readonly outcome: "leaving" | "done" | "refused" | "unknown" | "mismatch";
      readonly readBack?: readonly NativeWrite[] | undefined;
    }
  | { readonly kind: "state"; readonly state: RunState; readonly why?: string | undefined }
  | { readonly kind: "word"; readonly word: OwnerWord }
  /** `bootCount` of a whole read made after the last write: what a restart is judged against. Any write makes it void. */
  | { readonly kind: "boot-count"; readonly bootCount: number }
  /** The owner states a switch-off after the last write and commit. */
  | { readonly kind: "stated-cycle" }
  /** Live alignment: what counts as new from here on, over what did before. Stands before the first bytes of its step leave. */
  | { readonly kind: "align"; readonly values: readonly NativeWrite[] }
);

/** How one setting stands after a run that reached neither side. */
export type SettingStanding = {
  readonly key: NativeKey;
  readonly standing: "old" | "new" | "other" | "unknown";
  readonly old: NativeValue;
  readonly new: NativeValue;
  readonly found?: NativeValue | undefined;
};

/** What the page shows of a run. A new object at every change. */
export type RunView = {
  readonly state: RunState;
  /** Requests are under way. */
  readonly busy: boolean;
  /** Requests of the act under way that are done, and all of them. */
  readonly progress: { readonly done: number; readonly total: number };
  /** `lost`: the port went away, the device fell silent or the journal cannot be written; `resume` or `readAgain` goes on. */
  readonly link: "up" | "lost";
  /** Why the run stands where it does, in one or two sentences; empty when there is nothing to say. */
  readonly why: string;
  /** While trying: the end of the countdown on the run's clock, and its whole length. */
  readonly countdown: { readonly endsAtMs: number; readonly seconds: number } | null;
  /** Changed slots that were not recalled since the new values are in place: named beside Keep. */
  readonly notLookedAt: readonly number[];
  /** The device's own timer would not put the old values back: only this page does. */
  readonly onlyThisPagePutsBack: boolean;
  /** A commit may have left: a restart does not bring the old values back for certain. */
  readonly commitMayHaveLeft: boolean;
  /** Wall clock of the last write or commit: a switch-off counts only after it. */
  readonly lastWriteAtMs: number | null;
  /** `mixed` and `unconfirmed`: how each setting stands by the last whole read. */
  readonly standings: readonly SettingStanding[];
};

/** Why an act of the owner was not taken. */
export type RunActRefusal =
  | "wrong-state" // the act does not belong to the state the run is in
  | "busy" // another act is under way
  | "too-late" // the countdown has ended: no answer is a "no"
  | "link-lost" // the device is not there
  | "nothing-new" // what would be kept is what was there before
  | "not-allowed" // the slot is not one of the plan's, or its raster does not fit the screen
  | "other-device"; // what answers is not the device that the run began with

/**
 * Where the journal lives: browser storage and the server, behind one door.
 *
 * `append` resolves when the entry survives a reload of the page; a server that is away does not hold it up.
 * It rejects only when the entry cannot be kept at all: then nothing more is sent.
 */
export interface JournalStore {
  append(entry: JournalEntry): Promise<void>;
  load(): Promise<readonly JournalEntry[]>;
}
