import type { DeviceLimits } from "@/lib/profile/limits";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { EditFigure } from "@/lib/timing/fit/editable-figures";
import type { FitFigure } from "@/lib/timing/fit/fit-types";
import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";
import { screenPresets } from "@/lib/timing/screen-presets";

/** Figures that a wish always states. Lines are those of a frame. */
export const WISHED = ["activeLines", "fieldRateHz", "activePx"] as const;
/** Figures that a wish states where they are kept. */
export const STATED = ["pixelClockHz", "lineRateHz", "lineTotal", "fieldLines"] as const;
/** Parts of blanking, which are kept where a raster is changed by hand. */
export const PARTS = [
  "horizontal.frontPorch",
  "horizontal.sync",
  "horizontal.backPorch",
  "vertical.frontPorch",
  "vertical.sync",
  "vertical.backPorch",
] as const;

export type WishedFigure = (typeof WISHED)[number];
export type StatedFigure = (typeof STATED)[number];
export type PartFigure = (typeof PARTS)[number];

/** Everything that can be kept. A stated figure is kept by being stated. */
export type KeptFigure = WishedFigure | PartFigure | "interlaced";

export type Wish = {
  readonly activeLines: number;
  readonly activePx: number;
  readonly fieldRateHz: number;
  readonly interlaced: boolean;
};

/** The screen that a mode is made for: a class of screens, an owner's own, or one that only a link told of. */
export type ModesScreen = {
  /** A preset's id, a screen's id. */
  readonly id: string;
  /** Null until the owner's screens are loaded. */
  readonly envelope: ScreenEnvelope | null;
};

export type ModesDevice = { readonly slug: string; readonly limits: DeviceLimits };

/** All that somebody chose on the page: what a link holds. Everything else follows from it. */
export type ModesChoices = {
  readonly wish: Wish;
  readonly stated: Readonly<Partial<Record<StatedFigure, number>>>;
  readonly keep: readonly KeptFigure[];
  /** The raster that was picked or made; null for the best one that there is. */
  readonly raster: RasterTiming | null;
  /** It was changed by hand, so figures change it instead of looking for another. */
  readonly byHand: boolean;
  readonly screen: ModesScreen;
  /** Null where no device is chosen. */
  readonly device: ModesDevice | null;
  /** Null: nothing is known about what arrives. */
  readonly source: SourceFormat | null;
};

export const DEFAULT_SOURCE: SourceFormat = { activePx: 1920, activeLines: 1080, interlaced: false, fieldRateHz: 60 };

const television = screenPresets[0];

/** What the page begins with: 240 lines at 60 Hz on a 525-line television, from 1080 lines, on any device. */
export const DEFAULT_CHOICES: ModesChoices = {
  wish: { activeLines: 240, activePx: 1440, fieldRateHz: 60, interlaced: false },
  stated: {},
  keep: [],
  raster: null,
  byHand: false,
  screen: { id: television?.id ?? "", envelope: television?.envelope ?? null },
  device: null,
  source: DEFAULT_SOURCE,
};

export const isStated = (figure: string): figure is StatedFigure => STATED.some((one) => one === figure);
export const isWished = (figure: string): figure is WishedFigure => WISHED.some((one) => one === figure);
export const isPart = (figure: string): figure is PartFigure => PARTS.some((one) => one === figure);

/** Everything that is kept, in the words of an edit; the scan is not one of them. */
export function keptForEdit({ keep, stated }: ModesChoices): EditFigure[] {
  const parts = keep.filter((figure) => figure !== "interlaced");
  return [...parts, ...STATED.filter((figure) => stated[figure] !== undefined)];
}

/** Everything that is kept, in the words of a fit. */
export function keptForFit({ keep, stated }: ModesChoices): FitFigure[] {
  const wished = keep.filter((figure) => figure === "interlaced" || isWished(figure));
  return [
    ...wished.filter((figure): figure is WishedFigure | "interlaced" => !isPart(figure)),
    ...STATED.filter((figure) => stated[figure] !== undefined),
  ];
}

/** Whether a figure is kept. */
export function isKept(choices: ModesChoices, figure: KeptFigure | StatedFigure): boolean {
  return isStated(figure) ? choices.stated[figure] !== undefined : choices.keep.includes(figure);
}
