import type { AttenuatorState } from "@/components/attenuator/attenuator-address";
import { parseFigure } from "@/components/ui/figures";
import { attenuator } from "@/lib/timing/attenuator";
import type { AttenuatorAnswer, AttenuatorInput } from "@/lib/timing/attenuator";
import type { ScreenEnvelope, Span } from "@/lib/timing/envelope";

/** The impedance of video. Source: ITU-R BT.470-5. */
const VIDEO_OHM = 75;
/** The nominal sync of composite video. Source: ITU-R BT.470-5 (0.3 V of 1 V peak to peak). */
const NOMINAL_SYNC_VPP = 0.3;

/** What the resistor leads to: the screen's own figures where it states them. */
export type Goal = { readonly loadOhm: number; readonly targetVpp: number; readonly takesVpp: Span | undefined };

/** The middle of a screen's levels, as the check of a sync level aims at; nominal video without a screen. */
export function goalOf(envelope: ScreenEnvelope | null): Goal {
  const takesVpp = envelope?.syncVpp;
  return {
    loadOhm: envelope?.loadOhm ?? VIDEO_OHM,
    targetVpp: takesVpp === undefined ? NOMINAL_SYNC_VPP : Number(((takesVpp[0] + takesVpp[1]) / 2).toFixed(4)),
    takesVpp,
  };
}

export type FigureField = Exclude<keyof AttenuatorState, "way" | "termination" | "screen">;

/** What the page can say: an answer, or which figures it still needs, or what is wrong with those it has. */
export type Outcome = {
  readonly answer: AttenuatorAnswer | null;
  readonly missing: readonly FigureField[];
  /** By field; `termination` for what the readings were terminated with. */
  readonly errors: Readonly<Partial<Record<FigureField | "termination" | "readings", string>>>;
  /** What was read of the fields, for the drawing. */
  readonly figures: Readonly<Partial<Record<FigureField, number>>>;
};

const fieldsByWay = {
  level: ["sourceVpp", "sourceOhm", "loadOhm", "targetVpp"],
  readings: ["firstOhm", "firstVpp", "secondOhm", "secondVpp", "readingOhm", "loadOhm", "targetVpp"],
} as const satisfies Readonly<Record<AttenuatorState["way"], readonly FigureField[]>>;

/** Field of this page by the path that a complaint of `attenuator` names. */
const fieldByPath: Readonly<Record<string, FigureField | "readings">> = {
  sourceVpp: "sourceVpp",
  sourceOhm: "sourceOhm",
  loadOhm: "loadOhm",
  targetVpp: "targetVpp",
  "measured[0].seriesOhm": "firstOhm",
  "measured[0].vpp": "firstVpp",
  "measured[1].seriesOhm": "secondOhm",
  "measured[1].vpp": "secondVpp",
  measured: "readings",
  readingOhm: "readings",
};

function typedOf(state: AttenuatorState, field: FigureField, goal: Goal): string {
  const typed = state[field].trim();
  if (field === "readingOhm" && state.termination === "75") return String(VIDEO_OHM);
  if (typed !== "" || (field !== "loadOhm" && field !== "targetVpp")) return typed;
  return String(goal[field]);
}

function inputOf(way: AttenuatorState["way"], figures: Outcome["figures"]): AttenuatorInput {
  const of = (field: FigureField) => figures[field] ?? Number.NaN;
  const goal = { loadOhm: of("loadOhm"), targetVpp: of("targetVpp") };
  if (way === "level") return { ...goal, sourceVpp: of("sourceVpp"), sourceOhm: of("sourceOhm") };
  return {
    ...goal,
    readingOhm: of("readingOhm"),
    measured: [
      { seriesOhm: of("firstOhm"), vpp: of("firstVpp") },
      { seriesOhm: of("secondOhm"), vpp: of("secondVpp") },
    ],
  };
}

/** Works out what is typed, as far as it goes. */
export function workOut(state: AttenuatorState, goal: Goal): Outcome {
  const figures: Partial<Record<FigureField, number>> = {};
  const errors: Partial<Record<FigureField | "termination" | "readings", string>> = {};
  const missing: FigureField[] = [];
  for (const field of fieldsByWay[state.way]) {
    const typed = typedOf(state, field, goal);
    const value = typed === "" ? null : parseFigure(typed);
    if (value !== null) figures[field] = value;
    else if (typed === "") missing.push(field);
    else errors[field] = "This is no figure.";
  }
  if (state.way === "readings" && state.termination === "none") {
    errors.termination =
      "A reading over an open input says nothing of the source: put 75 Ω across the output and read again.";
  }
  if (missing.length > 0 || Object.keys(errors).length > 0) return { answer: null, missing, errors, figures };
  const answer = attenuator(inputOf(state.way, figures));
  if (answer.ok) return { answer: answer.value, missing, errors, figures };
  for (const { path, message } of answer.error) errors[fieldByPath[path] ?? "readings"] = message;
  return { answer: null, missing, errors, figures };
}
