import type { NativeKey, NativeValue, NativeWrite } from "../native";

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
);

/** How one setting stands after a run that reached neither side. */
export type SettingStanding = {
  readonly key: NativeKey;
  readonly standing: "old" | "new" | "other" | "unknown";
  readonly old: NativeValue;
  readonly new: NativeValue;
  readonly found?: NativeValue | undefined;
};
