import type { ScreenEnvelope, SyncKind } from "@/lib/timing/envelope";
import { activeFrameLines, fieldLines, fieldRateHz, lineRateHz, lineTotal } from "@/lib/timing/rates";
import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";
import {
  effectivePicture,
  type EffectivePicture,
  type PicturePlacement,
  type PictureProblem,
  type TrimEdges,
} from "./effective-picture";
import { lockOf, type Lock, type LockTrouble } from "./lock";
import { BLACK, inkAt, type Ink, type Pattern, type PatternFrame } from "./patterns";

export type ScreenInput = {
  readonly source: SourceFormat;
  readonly trim: TrimEdges;
  /** Null: nothing is put out. */
  readonly mode: RasterTiming | null;
  readonly placement: PicturePlacement;
  readonly screen: ScreenEnvelope | undefined;
  readonly syncKind?: SyncKind | undefined;
  readonly pattern: Pattern;
  /** The longer side of the picture; 640 where it is not named, 2 048 at most. */
  readonly longSidePx?: number | undefined;
};

/** A stretch of one row in one ink. */
export type InkRun = { readonly leftPx: number; readonly widthPx: number; readonly ink: Ink };
/** One row, or what is drawn of it: a dark gap stays between the lines of a raster that has few. */
export type ScreenRow = { readonly topPx: number; readonly heightPx: number; readonly runs: readonly InkRun[] };
export type ScreenRect = {
  readonly leftPx: number;
  readonly topPx: number;
  readonly widthPx: number;
  readonly heightPx: number;
};

/** A still picture of a screen, as data. Always simulated: whoever shows it says so. */
export type SimulatedScreen = {
  readonly locked: boolean;
  /** What keeps the screen from locking, or leaves nothing of the picture; empty when all is well. */
  readonly why: readonly (LockTrouble | PictureProblem)[];
  readonly widthPx: number;
  readonly heightPx: number;
  readonly rows: readonly ScreenRow[];
  /** What the frame hides at each edge, as far as the screen says. */
  readonly hidden: readonly ScreenRect[];
};

const LONG_SIDE_PX = 640;
const MAX_LONG_SIDE_PX = 2048;
/** A still of a rolling picture is taken so many fields after it began. Ours: any number shows a roll. */
const ROLL_FIELDS = 10;
/** From this many lines on a source is 16 : 9. Common practice, no source. */
const WIDE_FROM_LINES = 720;

function aspectOf(screen: ScreenEnvelope | undefined): number {
  const [width = 4, height = 3] = (screen?.aspect ?? "4:3").split(":").map(Number);
  return width > 0 && height > 0 ? width / height : 4 / 3;
}

function canvasSize(input: ScreenInput): { widthPx: number; heightPx: number } {
  const long = Math.min(input.longSidePx ?? LONG_SIDE_PX, MAX_LONG_SIDE_PX);
  const aspect = aspectOf(input.screen);
  return aspect >= 1
    ? { widthPx: long, heightPx: Math.round(long / aspect) }
    : { widthPx: Math.round(long * aspect), heightPx: long };
}

/** The ink at a place of the mode's active raster: px, and line of the frame. */
function rasterInk(input: ScreenInput, picture: EffectivePicture, frame: PatternFrame, px: number, line: number): Ink {
  const { raster, placed, source } = picture;
  if (px < raster.leftPx || px >= raster.leftPx + raster.widthPx) return BLACK;
  if (line < raster.topLines || line >= raster.topLines + raster.heightLines) return BLACK;
  const sourcePx = source.leftPx + (px - placed.leftPx) * picture.sourcePxPerOutputPx;
  const sourceLine = source.topLines + Math.floor((line - placed.topLines + 0.5) * picture.sourceLinesPerOutputLine);
  return inkAt(input.pattern, sourcePx, sourceLine, frame);
}

/** Joins a row's points to runs; black ones are left out, since the ground is black. */
function runsOf(widthPx: number, inkOf: (column: number) => Ink): InkRun[] {
  const runs: InkRun[] = [];
  let from = 0;
  let ink = inkOf(0);
  for (let column = 1; column <= widthPx; column += 1) {
    const next = column < widthPx ? inkOf(column) : -1;
    if (next === ink) continue;
    if (ink !== BLACK) runs.push({ leftPx: from, widthPx: column - from, ink });
    [from, ink] = [column, next];
  }
  return runs;
}

/** Rows of a picture of `lines` lines; never more than the canvas has. */
function rowsOf(
  lines: number,
  size: { widthPx: number; heightPx: number },
  inkOf: (line: number, across: number) => Ink,
): ScreenRow[] {
  const drawn = Math.max(1, Math.min(lines, size.heightPx));
  return Array.from({ length: drawn }, (_, row) => {
    const topPx = Math.round((row * size.heightPx) / drawn);
    const heightPx = Math.round(((row + 1) * size.heightPx) / drawn) - topPx;
    const line = Math.floor(((row + 0.5) * lines) / drawn);
    return {
      topPx,
      heightPx: heightPx > 1 ? heightPx - 1 : heightPx,
      runs: runsOf(size.widthPx, (column) => inkOf(line, (column + 0.5) / size.widthPx)),
    };
  });
}

type Painter = {
  readonly input: ScreenInput;
  readonly mode: RasterTiming;
  readonly picture: EffectivePicture;
  readonly frame: PatternFrame;
};

function lockedRows(
  { input, mode, picture, frame }: Painter,
  size: { widthPx: number; heightPx: number },
): ScreenRow[] {
  return rowsOf(activeFrameLines(mode), size, (line, across) =>
    rasterInk(input, picture, frame, across * mode.horizontal.active, line),
  );
}

/**
 * A screen that scans at its own rates while the signal runs at others: each of its lines starts where the signal
 * happens to be, so lines tear by the difference of the line rates, and the field rolls by that of the field rates.
 */
function tornRows(
  { input, mode, picture, frame }: Painter,
  lock: Lock,
  size: { widthPx: number; heightPx: number },
): ScreenRow[] {
  const lineRatio = lineRateHz(mode) / lock.ownLineRateHz;
  const roll = ROLL_FIELDS * (fieldRateHz(mode) / lock.ownFieldRateHz - 1);
  // Whole lines: a roll alone does not shift a line.
  const startLine = Math.floor((roll - Math.floor(roll)) * fieldLines(mode));
  const lines = Math.max(1, Math.round(mode.vertical.active / lineRatio));
  const visible = mode.horizontal.active / lineTotal(mode);
  const fields = mode.interlaced ? 2 : 1;
  return rowsOf(Math.min(lines, size.heightPx), size, (line, across) => {
    const at = startLine + (line + across * visible) * lineRatio;
    const px = (at - Math.floor(at)) * lineTotal(mode);
    const signalLine = Math.floor(at) % fieldLines(mode);
    const blank = px >= mode.horizontal.active || signalLine >= mode.vertical.active;
    return blank ? BLACK : rasterInk(input, picture, frame, px, signalLine * fields);
  });
}

function hiddenRects(
  screen: ScreenEnvelope | undefined,
  { widthPx, heightPx }: { widthPx: number; heightPx: number },
): ScreenRect[] {
  const visible = screen?.visiblePct;
  if (!visible) return [];
  const share = (pct: number, of: number) => Math.round((Math.min(Math.max(pct, 0), 100) * of) / 100);
  const [left, right] = [share(visible.left, widthPx), share(visible.right, widthPx)];
  const [top, bottom] = [share(visible.top, heightPx), share(visible.bottom, heightPx)];
  const middlePx = Math.max(0, heightPx - top - bottom);
  const rects = [
    { leftPx: 0, topPx: 0, widthPx, heightPx: top },
    { leftPx: 0, topPx: heightPx - bottom, widthPx, heightPx: bottom },
    { leftPx: 0, topPx: top, widthPx: left, heightPx: middlePx },
    { leftPx: widthPx - right, topPx: top, widthPx: right, heightPx: middlePx },
  ];
  return rects.filter((rect) => rect.widthPx > 0 && rect.heightPx > 0);
}

/**
 * What a screen would show of a pattern: in lock or not, placed, with what its frame hides. Pure data for a canvas.
 *
 * Lines are taken nearest; how a device's filter mixes them is not drawn. Bound: 2 048 × 2 048 points.
 */
export function simulateScreen(input: ScreenInput): SimulatedScreen {
  const size = canvasSize(input);
  const lock = lockOf(input.mode, input.screen, input.syncKind);
  const base = { locked: lock.locked, why: lock.why, ...size, rows: [], hidden: hiddenRects(input.screen, size) };
  if (!input.mode || lock.why.includes("no-raster")) return base;
  const { source, trim, mode, placement } = input;
  const picture = effectivePicture({ source, trim, mode, placement });
  if (!picture.ok) return { ...base, why: [...lock.why, picture.error] };
  const aspect = source.activeLines >= WIDE_FROM_LINES ? 16 / 9 : 4 / 3;
  const frame = { widthPx: source.activePx, heightLines: source.activeLines, aspect };
  const painter = { input, mode, picture: picture.value, frame };
  return { ...base, rows: lock.locked ? lockedRows(painter, size) : tornRows(painter, lock, size) };
}
