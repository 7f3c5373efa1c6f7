/** `stop`: cannot be written. `caution`: must be acknowledged. `note`: good to know. */
export type Severity = "stop" | "caution" | "note";

/** One value set at a document path (`slots[4].placement.heightPct`). `undefined` takes the value out. */
export type DocumentPatch = { readonly path: string; readonly value: string | number | boolean | null };

/** A way to make a finding pass by one click. `label` names the act: "Use 97.6 %", "Leave slot 1 out". */
export type Remedy =
  | { readonly kind: "set"; readonly label: string; readonly patch: readonly DocumentPatch[] }
  | { readonly kind: "leave-out"; readonly label: string; readonly slot: number };

/** What a check says. Paths name slots by number and modes by key. */
export type Finding = {
  /** family.name, as `screen.line-rate` */
  readonly rule: string;
  readonly path: string;
  readonly severity: Severity;
  readonly measured?: number | string | undefined;
  readonly limit?: number | string | readonly [number, number] | undefined;
  readonly unit?: string | undefined;
  /** The fact, short: "Slot 1 is 19 lines too tall." */
  readonly sentence: string;
  /** The limit and the way out, in one or two sentences. */
  readonly detail?: string | undefined;
  /** Where the limit comes from: a standard by name, "service literature", "driver", "common practice, no source". */
  readonly limitSource?: string | undefined;
  /** Slots that this is about; empty when it is about the whole. */
  readonly slots: readonly number[];
  readonly remedies: readonly Remedy[];
};
