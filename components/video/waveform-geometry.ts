import type { RasterTiming } from "@/lib/timing/raster";
import { activeFrameLines, fieldLines, horizontalUs } from "@/lib/timing/rates";

/** One part of a line or of a field as it is drawn: where it lies, and how long it is in its own unit. */
export type DrawnPart = {
  readonly part: "frontPorch" | "sync" | "backPorch" | "active";
  readonly fromPx: number;
  readonly toPx: number;
  /** µs across, lines down. */
  readonly length: number;
  /** Pixel clocks across, lines down. */
  readonly count: number;
};

const order = ["frontPorch", "sync", "backPorch", "active"] as const;

export type Waveform = {
  readonly parts: readonly DrawnPart[];
  /** How many times wider blanking is drawn than the picture. */
  readonly blankingFactor: number;
  /** px of a µs, or of a line, of blanking; 0 where there is none. */
  readonly pxPerBlank: number;
};

type WaveformShape = {
  readonly widthPx: number;
  /** Share of the width that blanking gets; where it has more by itself it is drawn true. */
  readonly blankingShare: number;
  /** Instead of the share: px of a µs, or of a line, of blanking. What is dragged stays under the pointer with it. */
  readonly pxPerBlank?: number | undefined;
};

/** Blanking never takes more of the width than this, so that there is a picture left. */
const MOST_BLANKING = 0.8;

function layOut(
  lengths: Readonly<Record<(typeof order)[number], number>>,
  counts: Readonly<Record<(typeof order)[number], number>>,
  shape: WaveformShape,
): Waveform {
  const blank = lengths.frontPorch + lengths.sync + lengths.backPorch;
  const natural = blank / (blank + lengths.active);
  const wanted = shape.pxPerBlank === undefined ? shape.blankingShare : (shape.pxPerBlank * blank) / shape.widthPx;
  const share = blank === 0 ? 0 : Math.max(natural, Math.min(wanted, MOST_BLANKING));
  const blankPx = shape.widthPx * share;
  const perBlank = blank === 0 ? 0 : blankPx / blank;
  const perActive = (shape.widthPx - blankPx) / lengths.active;
  let at = 0;
  const parts = order.map((part): DrawnPart => {
    const fromPx = at;
    at += lengths[part] * (part === "active" ? perActive : perBlank);
    return { part, fromPx, toPx: at, length: lengths[part], count: counts[part] };
  });
  return { parts, blankingFactor: perBlank === 0 ? 1 : perBlank / perActive, pxPerBlank: perBlank };
}

/** One line, from the front porch to the end of the picture, to scale in µs within blanking and within the picture. */
export function lineWaveform(timing: RasterTiming, shape: WaveformShape): Waveform {
  const { active, frontPorch, sync, backPorch } = timing.horizontal;
  return layOut(horizontalUs(timing), { active, frontPorch, sync, backPorch }, shape);
}

/** One field, in lines. */
export function fieldWaveform(timing: RasterTiming, shape: WaveformShape): Waveform {
  const { active, frontPorch, sync, backPorch } = timing.vertical;
  const lines = { active, frontPorch, sync, backPorch };
  return layOut(lines, lines, shape);
}

export type WaveformLevels = { readonly syncPx: number; readonly blackPx: number; readonly whitePx: number };

/** SVG path of a waveform: black on the porches, down in sync, up while the picture lasts, black at its end. */
export function waveformPath(parts: readonly DrawnPart[], levels: WaveformLevels, endPx: number): string {
  const level = { frontPorch: levels.blackPx, sync: levels.syncPx, backPorch: levels.blackPx, active: levels.whitePx };
  const begin = `M0 ${round(levels.blackPx)}`;
  const drawn = parts.map(({ part, toPx }) => `V${round(level[part])}H${round(toPx)}`).join("");
  return `${begin}${drawn}V${round(levels.blackPx)}H${round(endPx)}`;
}

function round(value: number): number {
  return Math.round(value * 100) / 100;
}

/** The small drawing that stands wherever a mode is named. All in CSS px. */
export const GLYPH = {
  widthPx: 130,
  heightPx: 18,
  lineWidthPx: 58,
  fieldFromPx: 66,
  fieldToPx: 130,
  /** One scale for all modes, so that two glyphs can be compared: 10.2 µs of blanking at 15 kHz take 25 px. */
  pxPerUs: 44 / 18,
  /** 625 lines fill the twin. */
  pxPerLine: 64 / 625,
} as const;

const GLYPH_LEVELS: WaveformLevels = { syncPx: 14, blackPx: 9, whitePx: 2 };

export type ModeGlyphDrawing = {
  readonly linePath: string;
  /** One row for a progressive mode; two that interleave where it is interlaced. */
  readonly fieldRows: readonly {
    readonly yPx: number;
    readonly fromPx: number;
    readonly toPx: number;
    readonly dashOffsetPx: number;
  }[];
  readonly interlaced: boolean;
  /** The mode has more lines in a field than the twin can show: it ends in a gap. */
  readonly isCutShort: boolean;
};

/** The glyph of a mode, made from its real timing. */
export function modeGlyph(timing: RasterTiming): ModeGlyphDrawing {
  const us = horizontalUs(timing);
  const blankUs = us.frontPorch + us.sync + us.backPorch;
  // A blanking longer than any standard's leaves 8 px for the picture to begin in.
  const pxPerUs = Math.min(GLYPH.pxPerUs, (GLYPH.lineWidthPx - 8) / blankUs);
  let at = 0;
  const run = (length: number) => round((at += length * pxPerUs));
  const linePath =
    `M0 ${GLYPH_LEVELS.blackPx}H${run(us.frontPorch)}V${GLYPH_LEVELS.syncPx}H${run(us.sync)}` +
    `V${GLYPH_LEVELS.blackPx}H${run(us.backPorch)}V${GLYPH_LEVELS.whitePx}H${GLYPH.lineWidthPx}`;
  const wanted = GLYPH.fieldFromPx + fieldLines(timing) * GLYPH.pxPerLine;
  const row = { fromPx: GLYPH.fieldFromPx, toPx: round(Math.min(wanted, GLYPH.fieldToPx)) };
  return {
    linePath,
    fieldRows: timing.interlaced
      ? [
          { ...row, yPx: 4, dashOffsetPx: 0 },
          { ...row, yPx: 13, dashOffsetPx: 4.5 },
        ]
      : [{ ...row, yPx: 8, dashOffsetPx: 0 }],
    interlaced: timing.interlaced,
    isCutShort: wanted > GLYPH.fieldToPx,
  };
}

/** "240 lines, progressive"; an interlaced mode counts those of the frame. */
export function scanWords(timing: Pick<RasterTiming, "interlaced" | "vertical">): string {
  const lines = timing.interlaced ? 2 * timing.vertical.active : timing.vertical.active;
  return `${lines} lines, ${timing.interlaced ? "interlaced" : "progressive"}`;
}

/** The glyph in words: shape of the line and of the field. */
export function glyphWords(timing: RasterTiming): string {
  const us = horizontalUs(timing);
  const total = us.active + us.frontPorch + us.sync + us.backPorch;
  return `Line of ${total.toFixed(2)} µs with ${us.sync.toFixed(2)} µs of sync; ${activeFrameLines(timing)} lines of picture, ${timing.interlaced ? "in two fields" : "in one field"}`;
}
