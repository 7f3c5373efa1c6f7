import type { JournalEntry } from "@/lib/serial/run/types";
import type { NativeValue, NativeWrite } from "@/lib/serial/native";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import { patternOf } from "@/lib/profile/paths";
import { shownRange, shownValue } from "@/components/bench/native-rows";
import { settingName } from "@/components/bench/setting-name";
import type { WireStretch } from "@/components/bench/wire-view";
import { formatFigure } from "@/components/ui/figures";

type Request = Extract<JournalEntry, { readonly kind: "request" }>;

/** One request of a run as the page lists it. */
export type RunStep = {
  readonly number: number;
  readonly what: string;
  readonly outcome: string;
  /** From before its bytes left to when its outcome was known. */
  readonly stretch: WireStretch;
};

const ORDERS: Readonly<Record<Exclude<Request["request"], "write" | "recall" | "mute">, string>> = {
  commit: "Store in non-volatile memory", arm: "Arm the device's timer", extend: "Extend the device's timer",
  confirm: "Confirm the device's timer", disarm: "Disarm the device's timer",
};

const OUTCOMES: Readonly<Record<Request["outcome"], string>> = {
  leaving: "under way", done: "done", refused: "refused", unknown: "no answer", mismatch: "another value",
};

/** "Slot 1, Horizontal position 12 px": a native value under its name, in the unit of its setting. */
export function nativeWords(key: string, value: NativeValue, driver: DriverDefinition): string {
  const setting = driver.settings.find((one) => one.key === (patternOf(key) ?? key));
  const shown = setting ? shownValue(setting, value) : value;
  const unit = setting ? (shownRange(setting)?.unit ?? "") : "";
  return `${settingName(key, driver)} ${typeof shown === "number" ? formatFigure(shown, unit, { decimalsAtMost: 3 }) : shown}`;
}

function writeWords(writes: readonly NativeWrite[], driver: DriverDefinition): string {
  const [first, ...rest] = writes;
  if (first === undefined) return "Write";
  return `Write ${nativeWords(first.key, first.value, driver)}${rest.length === 0 ? "" : ` and ${rest.length} more`}`;
}

function whatOf(step: Request, driver: DriverDefinition): string {
  switch (step.request) {
    case "write": return writeWords(step.new ?? [], driver);
    case "recall": return `Make slot ${step.slot ?? 0} active`;
    case "mute": return step.muteOn === false ? "Let the output out" : "Mute the output";
    default: return ORDERS[step.request];
  }
}

/** The requests of a run in their order, each with what became of it and when its bytes were on the wire. */
export function runSteps(journal: readonly JournalEntry[], driver: DriverDefinition): RunStep[] {
  const steps = new Map<number, RunStep>();
  for (const entry of journal) {
    if (entry.kind !== "request") continue;
    const fromMs = steps.get(entry.number)?.stretch.fromMs ?? entry.atMs;
    const outcome = entry.request === "write" && entry.outcome === "done" ? "read back" : OUTCOMES[entry.outcome];
    steps.set(entry.number, { number: entry.number, what: whatOf(entry, driver), outcome, stretch: { fromMs, toMs: entry.atMs } });
  }
  return [...steps.values()];
}
