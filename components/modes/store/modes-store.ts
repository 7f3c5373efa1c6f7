import { createStore, type StoreApi } from "zustand/vanilla";
import type { Remedy } from "@/lib/profile/finding";
import type { PathMessage } from "@/lib/result";
import { editableFigures, type EditFigure } from "@/lib/timing/fit/editable-figures";
import type { EditedFigure } from "@/lib/timing/fit/change-figure";
import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";
import {
  backToBest,
  pick,
  setKept,
  setScan,
  takeRaster,
  takeRemedy,
  turnFigure,
  type Refusal,
  type TypedFigure,
} from "@/components/modes/store/acts";
import { answerOf, type ModesAnswer } from "@/components/modes/store/answer";
import type {
  KeptFigure,
  ModesChoices,
  ModesDevice,
  ModesScreen,
  StatedFigure,
} from "@/components/modes/store/choices";

/** What changed in the raster in hand with the last figure that was changed, and how to take it back. */
export type ChangeNote = {
  readonly figure: TypedFigure | "interlaced" | null;
  readonly others: readonly EditedFigure[];
  readonly before: ModesChoices;
};

export type ModesState = {
  readonly choices: ModesChoices;
  /** Null while the screen is being loaded. */
  readonly answer: ModesAnswer | null;
  readonly note: ChangeNote | null;
  /** What is kept stood in the way of the figure that was typed last. */
  readonly refusal: Refusal | null;
  /** Why a figure or a choice was not taken, by the member of the request that is to blame. */
  readonly errors: Readonly<Partial<Record<string, string>>>;
};

type Hold = { readonly figure: TypedFigure; readonly choices: ModesChoices; readonly hand: RasterTiming | null };

export type ModesStore = {
  readonly store: StoreApi<ModesState>;
  readonly acts: ModesActs;
};

export type ModesActs = ReturnType<typeof createActs>;

function othersBetween(before: RasterTiming | null, after: RasterTiming | null, figure: string | null): EditedFigure[] {
  if (before === null || after === null) return [];
  const [from, to] = [editableFigures(before), editableFigures(after)];
  const names = Object.keys(to) as EditFigure[];
  return names
    .filter((name) => name !== figure && from[name] !== to[name])
    .map((name) => ({ figure: name, from: from[name], to: to[name] }));
}

const errorsOf = (problems: readonly PathMessage[]) =>
  Object.fromEntries(problems.map(({ path, message }) => [path, message]));

const handOf = ({ answer }: ModesState): RasterTiming | null => answer?.hand?.timing ?? null;

function createActs(store: StoreApi<ModesState>) {
  /** The figure that is held now, and what the page was when it was taken hold of. */
  let hold: Hold | null = null;

  const settle = (choices: ModesChoices, figure: ChangeNote["figure"], from: Hold | ModesState) => {
    const answer = answerOf(choices);
    if (!answer.ok && choices.screen.envelope !== null) {
      store.setState({
        refusal: null,
        errors: errorsOf(answer.error),
      });
      return;
    }
    const value = answer.ok ? answer.value : null;
    const before = "answer" in from ? handOf(from) : from.hand;
    const others = othersBetween(before, value?.hand?.timing ?? null, figure);
    const note = others.length === 0 ? null : { figure, others, before: from.choices };
    store.setState({ choices, answer: value, note, refusal: null, errors: {} });
  };
  const change = (
    next: (choices: ModesChoices, hand: RasterTiming | null) => ModesChoices,
    figure: ChangeNote["figure"] = null,
  ) => {
    const state = store.getState();
    const choices = next(state.choices, handOf(state));
    if (choices !== state.choices) settle(choices, figure, state);
  };

  return {
    /** A field or a handle is taken hold of: until it is let go, every change of it begins from here. */
    hold: (figure: TypedFigure) => {
      const state = store.getState();
      hold = { figure, choices: state.choices, hand: handOf(state) };
    },
    letGo: () => {
      hold = null;
      store.setState({ errors: {} });
    },
    turn: (figure: TypedFigure, value: number, isBorder = false) => {
      const state = store.getState();
      const from = hold?.figure === figure ? hold : { figure, choices: state.choices, hand: handOf(state) };
      const turned = turnFigure({ choices: from.choices, hand: from.hand, figure, value, isBorder });
      if (turned.ok) settle(turned.value, figure, from);
      else if (turned.error.by.length > 0) store.setState({ refusal: turned.error, errors: {} });
      else store.setState({ refusal: null, errors: { [figure]: turned.error.message } });
    },
    keep: (figure: KeptFigure | StatedFigure, isOn: boolean) =>
      change((choices, hand) => setKept(choices, hand, figure, isOn)),
    /** Lets go of what stood in the way, and does what was asked. */
    letGoAndTurn: ({ figure, value, by }: Refusal) => {
      const { choices } = store.getState();
      const loose = by.reduce((all, one) => setKept(all, null, one, false), choices);
      store.setState({ choices: loose });
      hold = null;
      const turned = turnFigure({ choices: loose, hand: handOf(store.getState()), figure, value });
      if (turned.ok) settle(turned.value, figure, store.getState());
    },
    scan: (interlaced: boolean) => change((choices) => setScan(choices, interlaced), "interlaced"),
    pick: (timing: RasterTiming) => change((choices) => pick(choices, timing)),
    takeRaster: (timing: RasterTiming) => change((choices) => takeRaster(choices, timing)),
    takeRemedy: (remedy: Remedy) =>
      change((choices, hand) => (hand === null ? choices : takeRemedy(choices, hand, remedy))),
    backToBest: () => change(backToBest),
    chooseScreen: (screen: ModesScreen) => change((choices) => ({ ...withoutPick(choices), screen })),
    /** The same screen, as it is known now: a raster that was picked for it stays. */
    updateScreen: (screen: ModesScreen) => change((choices) => ({ ...choices, screen })),
    chooseDevice: (device: ModesDevice | null) => change((choices) => ({ ...withoutPick(choices), device })),
    chooseSource: (source: SourceFormat | null) => change((choices) => ({ ...choices, source })),
    undo: () => {
      const { note } = store.getState();
      if (note === null) return;
      const answer = answerOf(note.before);
      if (answer.ok)
        store.setState({ choices: note.before, answer: answer.value, note: null, refusal: null, errors: {} });
    },
    dismiss: () => store.setState({ note: null, refusal: null }),
  };
}

/** A picked candidate was one of another screen or device; what was made by hand stays. */
function withoutPick(choices: ModesChoices): ModesChoices {
  return choices.byHand ? choices : { ...choices, raster: null };
}

/** The store of one mounted page. `choices` must be answerable: those of a link are. */
export function createModesStore(choices: ModesChoices): ModesStore {
  const answer = answerOf(choices);
  const store = createStore<ModesState>(() => ({
    choices,
    answer: answer.ok ? answer.value : null,
    note: null,
    refusal: null,
    errors: answer.ok || choices.screen.envelope === null ? {} : errorsOf(answer.error),
  }));
  return { store, acts: createActs(store) };
}
