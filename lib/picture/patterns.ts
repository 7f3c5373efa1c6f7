/** Still test pictures. `circle`: circles and a grid. `crosshatch`: white lines. `bars`: colour bars at 75 %. */
export type Pattern = "circle" | "crosshatch" | "bars";

export const patterns: readonly Pattern[] = ["circle", "crosshatch", "bars"];

/** Index into `inks`. */
export type Ink = number;

/** Colours that patterns are drawn in; 75 % of 255 is 191 (BF). Source of the bars' order: common practice, no source. */
export const inks: readonly string[] = [
  "#000000",
  "#ffffff",
  "#23222e",
  "#8d8c99",
  "#bfbfbf",
  "#bfbf00",
  "#00bfbf",
  "#00bf00",
  "#bf00bf",
  "#bf0000",
  "#0000bf",
];
export const BLACK: Ink = 0;
const WHITE: Ink = 1;
const DARK: Ink = 2;
const GREY: Ink = 3;
const FIRST_BAR: Ink = 4;
const BARS = 8;

/** What a pattern is drawn on: the source's picture, before trim. */
export type PatternFrame = {
  readonly widthPx: number;
  readonly heightLines: number;
  /** Width by height as it is meant to be seen. */
  readonly aspect: number;
};

/** Cells of the grid across and down in a 4 : 3 picture; a wider one has more across, so that cells stay square. */
const GRID_DOWN = 9;
/**
 * Thickness of a line, in heights of the picture: two lines of 240, so that none falls between the lines of a raster,
 * and none is a single line, which would flash on an interlaced screen.
 */
const LINE_HEIGHT = 1 / 120;

/** Distance to the nearest grid line, in heights of the picture. */
function toGrid(position: number, cell: number): number {
  const cells = position / cell;
  return Math.abs(cells - Math.round(cells)) * cell;
}

function circleInk(x: number, y: number, half: number, aspect: number): Ink {
  const [dx, dy] = [x - aspect / 2, y - 0.5];
  const radius = Math.sqrt(dx * dx + dy * dy);
  if (Math.abs(radius - 0.42) < half * 1.5 || Math.abs(radius - 0.21) < half) return WHITE;
  return toGrid(dx, 1 / GRID_DOWN) < half || toGrid(y, 1 / GRID_DOWN) < half ? GREY : DARK;
}

/**
 * The ink of a pattern at a point of the source, in px and lines from its top left corner; black outside the source.
 */
export function inkAt(pattern: Pattern, px: number, line: number, frame: PatternFrame): Ink {
  if (px < 0 || line < 0 || px >= frame.widthPx || line >= frame.heightLines) return BLACK;
  if (pattern === "bars") {
    const bar = Math.floor((px * BARS) / frame.widthPx);
    return bar === BARS - 1 ? BLACK : FIRST_BAR + bar;
  }
  // In heights of the picture, so that a circle is round where the picture has its own shape.
  const [x, y] = [(px / frame.widthPx) * frame.aspect, line / frame.heightLines];
  const half = LINE_HEIGHT / 2;
  if (pattern === "circle") return circleInk(x, y, half, frame.aspect);
  return toGrid(x - frame.aspect / 2, 1 / GRID_DOWN) < half || toGrid(y, 1 / GRID_DOWN) < half ? WHITE : BLACK;
}
