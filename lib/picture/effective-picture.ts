import { fail, ok, type Result } from "@/lib/result";
import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";

/** Source px and source lines (of the frame) cut from each edge; negative adds black. Absent = 0. */
export type TrimEdges = {
  readonly leftPx?: number | undefined;
  readonly rightPx?: number | undefined;
  readonly topLines?: number | undefined;
  readonly bottomLines?: number | undefined;
};

/** Size in % of the active raster (absent = 100); offset of its centre in px and field lines (absent = 0). */
export type PicturePlacement = {
  readonly widthPct?: number | undefined;
  readonly heightPct?: number | undefined;
  readonly offsetPx?: number | undefined;
  readonly offsetLines?: number | undefined;
};

/** A stretch on one axis: the first px or line, and how many. */
export type Extent = { readonly first: number; readonly size: number };

/** A rectangle in px and lines. */
export type PictureRect = {
  readonly leftPx: number;
  readonly topLines: number;
  readonly widthPx: number;
  readonly heightLines: number;
};

export type EffectivePicture = {
  /** What is taken of the source, in px and lines of its frame; starts below 0 where trim adds black. */
  readonly source: PictureRect;
  /** Where it goes, in px and lines of the mode's frame, before the raster's edges cut it. */
  readonly placed: PictureRect;
  /** The part of `placed` inside the active raster. */
  readonly raster: PictureRect;
  /** What the edges cut, in px and lines of the mode's frame. */
  readonly cut: {
    readonly leftPx: number;
    readonly rightPx: number;
    readonly topLines: number;
    readonly bottomLines: number;
  };
  readonly sourcePxPerOutputPx: number;
  /** Source lines per frame line of the output, over the size before the cut. */
  readonly sourceLinesPerOutputLine: number;
};

/** `nothing-left`: trim takes the whole source. `nothing-inside`: no part of the picture lies in the raster. */
export type PictureProblem = "nothing-left" | "nothing-inside";

/** Far below what a step of any device makes: keeps 250 · 100.2 % at 250.5 although binary fractions fall short of it. */
const BINARY_NOISE = 1e-9;

/**
 * Placement on one axis: size = ⌊active · pct / 100 + ½⌋, first = ⌊(active − size) / 2⌋ + offset.
 *
 * @param active px, or lines per field
 */
export function placeExtent(active: number, sizePct: number, offset: number): Extent {
  const size = Math.floor((active * sizePct) / 100 + 0.5 + BINARY_NOISE);
  return { first: Math.floor((active - size) / 2) + offset, size };
}

/** What of an extent lies outside 0 … active, before and after it. */
export function cutOff(active: number, { first, size }: Extent): { before: number; after: number } {
  return { before: Math.max(0, -first), after: Math.max(0, first + size - active) };
}

/** Where a placement puts the picture on both axes; vertically in lines per **field**. */
export function placeInField(mode: RasterTiming, placement: PicturePlacement): { across: Extent; down: Extent } {
  return {
    across: placeExtent(mode.horizontal.active, placement.widthPct ?? 100, placement.offsetPx ?? 0),
    down: placeExtent(mode.vertical.active, placement.heightPct ?? 100, placement.offsetLines ?? 0),
  };
}

/** What trim leaves of a source, in px and lines of its frame; null when nothing is left. */
export function trimSource(source: SourceFormat, trim: TrimEdges): PictureRect | null {
  const leftPx = trim.leftPx ?? 0;
  const topLines = trim.topLines ?? 0;
  const widthPx = source.activePx - leftPx - (trim.rightPx ?? 0);
  const heightLines = source.activeLines - topLines - (trim.bottomLines ?? 0);
  return widthPx > 0 && heightLines > 0 ? { leftPx, topLines, widthPx, heightLines } : null;
}

/**
 * The one composition of the three reaches: source minus trim, laid by the placement into the mode's active raster.
 *
 * An interlaced mode is worked in field lines and then doubled.
 * @param mode without `rasterProblems`
 */
export function effectivePicture(input: {
  readonly source: SourceFormat;
  readonly trim: TrimEdges;
  readonly mode: RasterTiming;
  readonly placement: PicturePlacement;
}): Result<EffectivePicture, PictureProblem> {
  const { mode } = input;
  const source = trimSource(input.source, input.trim);
  if (!source) return fail("nothing-left");
  const { across, down } = placeInField(mode, input.placement);
  const cutAcross = cutOff(mode.horizontal.active, across);
  const cutDown = cutOff(mode.vertical.active, down);
  const widthPx = across.size - cutAcross.before - cutAcross.after;
  const fieldLines = down.size - cutDown.before - cutDown.after;
  if (widthPx <= 0 || fieldLines <= 0) return fail("nothing-inside");
  const fields = mode.interlaced ? 2 : 1;
  const topLines = (down.first + cutDown.before) * fields;
  return ok({
    source,
    placed: {
      leftPx: across.first,
      topLines: down.first * fields,
      widthPx: across.size,
      heightLines: down.size * fields,
    },
    raster: { leftPx: across.first + cutAcross.before, topLines, widthPx, heightLines: fieldLines * fields },
    cut: {
      leftPx: cutAcross.before,
      rightPx: cutAcross.after,
      topLines: cutDown.before * fields,
      bottomLines: cutDown.after * fields,
    },
    sourcePxPerOutputPx: source.widthPx / across.size,
    sourceLinesPerOutputLine: source.heightLines / (down.size * fields),
  });
}
