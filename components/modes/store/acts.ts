import { patchedMode } from "@/lib/profile/mode-findings";
import type { Remedy } from "@/lib/profile/finding";
import { fail, ok, type Result } from "@/lib/result";
import { changeFigure } from "@/lib/timing/fit/change-figure";
import { editableFigures, type EditFigure } from "@/lib/timing/fit/editable-figures";
import type { RasterTiming } from "@/lib/timing/raster";
import { activeFrameLines, fieldRateHz } from "@/lib/timing/rates";
import { deviceTimingLimits } from "@/components/modes/store/answer";
import {
  isPart,
  isStated,
  isWished,
  keptForEdit,
  type KeptFigure,
  type ModesChoices,
  type PartFigure,
  type StatedFigure,
  type WishedFigure,
} from "@/components/modes/store/choices";

/** A figure that can be typed or dragged. */
export type TypedFigure = WishedFigure | StatedFigure | PartFigure;

/** Why a figure was not taken. `by` are the kept figures that stand in the way; without any it is impossible. */
export type Refusal = {
  readonly figure: TypedFigure;
  readonly value: number;
  readonly by: readonly EditFigure[];
  readonly message: string;
};

export type FigureTurn = {
  /** What the page was when the figure was taken hold of: every change of one hold begins there. */
  readonly choices: ModesChoices;
  readonly hand: RasterTiming | null;
  readonly figure: TypedFigure;
  readonly value: number;
  /** A border is dragged: what lies left of it stays where it is, if what is kept allows. */
  readonly isBorder?: boolean | undefined;
};

/** Lines of a wish count those of a frame, lines of a raster those of a field. */
function inRaster(figure: TypedFigure, value: number, { interlaced }: RasterTiming): number {
  return figure === "activeLines" && interlaced ? value / 2 : value;
}

function changedByHand(turn: FigureTurn, timing: RasterTiming): Result<RasterTiming, Refusal> {
  const { choices, figure, value, isBorder = false } = turn;
  const inField = inRaster(figure, value, timing);
  const refuse = (message: string, by: readonly EditFigure[] = []) => fail({ figure, value, by, message });
  if (!Number.isInteger(inField) && figure !== "fieldRateHz" && figure !== "lineRateHz")
    return refuse(
      figure === "activeLines" ? "An interlaced frame has an even number of picture lines." : "Must be a whole number.",
    );
  const keep = keptForEdit(choices).filter((one) => one !== figure);
  const left = isBorder && figure.endsWith("backPorch") ? leftOf(figure) : [];
  const edit = { timing, figure, value: inField, device: deviceTimingLimits(choices) };
  const border = left.length === 0 ? undefined : changeFigure({ ...edit, keep: [...keep, ...left] });
  const changed = border?.ok === true ? border : changeFigure({ ...edit, keep });
  if (changed.ok) return ok(changed.value.timing);
  return refuse(changed.error.message, changed.error.by);
}

function leftOf(figure: TypedFigure): EditFigure[] {
  return figure.startsWith("vertical")
    ? ["vertical.frontPorch", "vertical.sync"]
    : ["horizontal.frontPorch", "horizontal.sync"];
}

/** The choices with the figure itself stated. */
function withFigure(choices: ModesChoices, figure: TypedFigure, value: number): ModesChoices {
  if (isWished(figure)) return { ...choices, wish: { ...choices.wish, [figure]: value } };
  if (isStated(figure)) return { ...choices, stated: { ...choices.stated, [figure]: value } };
  return choices;
}

/**
 * A figure is typed or dragged.
 *
 * A raster made by hand is changed, and as little else of it as what is kept leaves; a part of blanking makes the
 * raster in hand one of that kind. Else the wish is another, and the rasters are looked for anew.
 */
export function turnFigure(turn: FigureTurn): Result<ModesChoices, Refusal> {
  const { choices, hand, figure, value } = turn;
  const stated = withFigure(choices, figure, value);
  if (hand === null || !(choices.byHand || isPart(figure))) return ok({ ...stated, raster: null, byHand: false });
  const changed = changedByHand(turn, hand);
  return changed.ok ? ok({ ...stated, raster: changed.value, byHand: true }) : changed;
}

/** Keeps a figure, or lets it go. Keeping a part of blanking holds the raster in hand as it is. */
export function setKept(
  choices: ModesChoices,
  hand: RasterTiming | null,
  figure: KeptFigure | StatedFigure,
  isOn: boolean,
): ModesChoices {
  if (isStated(figure)) {
    const { [figure]: _gone, ...others } = choices.stated;
    const value = hand === null ? undefined : editableFigures(hand)[figure];
    return { ...choices, stated: isOn && value !== undefined ? { ...others, [figure]: value } : others };
  }
  const keep = choices.keep.filter((one) => one !== figure);
  const held = isOn && isPart(figure) && hand !== null ? { raster: hand, byHand: true } : {};
  return { ...choices, ...held, keep: isOn ? [...keep, figure] : keep };
}

/** Another scan: twice or half the lines, unless they are kept, and rasters looked for anew. */
export function setScan(choices: ModesChoices, interlaced: boolean): ModesChoices {
  const { wish, keep, stated } = choices;
  if (wish.interlaced === interlaced) return choices;
  const lines = interlaced ? wish.activeLines * 2 : Math.max(1, Math.round(wish.activeLines / 2));
  const activeLines = keep.includes("activeLines") ? wish.activeLines : lines;
  // A count of field lines was that of the other scan.
  const { fieldLines: _ofTheOther, ...others } = stated;
  return { ...choices, wish: { ...wish, interlaced, activeLines }, stated: others, raster: null, byHand: false };
}

/** A candidate is taken as it is. */
export function pick(choices: ModesChoices, timing: RasterTiming): ModesChoices {
  return { ...choices, raster: timing, byHand: false, keep: choices.keep.filter((figure) => !isPart(figure)) };
}

/** A raster from elsewhere, as a modeline: the wish becomes its own, and nothing is kept. */
export function takeRaster(choices: ModesChoices, timing: RasterTiming): ModesChoices {
  const wish = {
    activeLines: activeFrameLines(timing),
    activePx: timing.horizontal.active,
    fieldRateHz: Number(fieldRateHz(timing).toFixed(3)),
    interlaced: timing.interlaced,
  };
  return { ...choices, wish, stated: {}, keep: [], raster: timing, byHand: true };
}

/** A remedy of a finding changes the raster in hand. */
export function takeRemedy(choices: ModesChoices, hand: RasterTiming, remedy: Remedy): ModesChoices {
  return { ...choices, raster: patchedMode(hand, remedy), byHand: true };
}

/** Lets go of what was made by hand: the best candidate is in hand again. */
export function backToBest(choices: ModesChoices): ModesChoices {
  return { ...choices, raster: null, byHand: false, keep: choices.keep.filter((figure) => !isPart(figure)) };
}
