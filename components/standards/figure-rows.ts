import { formatFigure, formatNumber } from "@/components/ui/figures";
import { compareRasters } from "@/lib/timing/catalogue/search-catalogue";
import type { RasterDifference } from "@/lib/timing/catalogue/search-catalogue";
import { linePeriodUs } from "@/lib/timing/rates";
import type { RasterTiming } from "@/lib/timing/raster";

/** One figure of two rasters as the page shows it. */
export type FigureRow = {
  readonly figure: string;
  readonly left: string;
  readonly right: string;
  readonly same: boolean;
  /** Right less left; empty for words and for what is the same. */
  readonly difference: string;
};

const words: Readonly<Record<string, string>> = {
  pixelClockHz: "Pixel clock",
  lineRateHz: "Line rate",
  fieldRateHz: "Field rate",
  lineTotal: "Line in all",
  fieldLines: "Field in all",
  "horizontal.active": "Picture across",
  "horizontal.frontPorch": "Front porch",
  "horizontal.sync": "Line sync",
  "horizontal.backPorch": "Back porch",
  "vertical.active": "Picture down",
  "vertical.frontPorch": "Front porch, field",
  "vertical.sync": "Field sync",
  "vertical.backPorch": "Back porch, field",
  scan: "Scan",
  "horizontal.polarity": "Line sync is",
  "vertical.polarity": "Field sync is",
};

type Style = { readonly unit: string; readonly per: number; readonly decimals: number };

const styles: Readonly<Record<string, Style>> = {
  pixelClockHz: { unit: "MHz", per: 1e6, decimals: 3 },
  lineRateHz: { unit: "kHz", per: 1000, decimals: 3 },
  fieldRateHz: { unit: "Hz", per: 1, decimals: 3 },
};

/** "1 line", "2 lines". */
function unitOf(value: number, unit: string): string {
  return Math.abs(value) === 1 ? unit.replace(/^(line|clock)s$/u, "$1") : unit;
}

/** Clocks in µs and lines in µs too: what a screen feels is time. */
function timeOf(row: RasterDifference, value: number, timing: RasterTiming): string {
  if (row.unit === "clocks") return formatFigure((value * 1e6) / timing.pixelClockHz, "µs", { decimals: 2 });
  if (row.unit !== "lines") return "";
  return formatFigure((value * linePeriodUs(timing)) / 1000, "ms", { decimals: 3 });
}

function valueText(row: RasterDifference, value: number | string, timing: RasterTiming): string {
  if (typeof value === "string") return value;
  const style = styles[row.figure];
  if (style !== undefined) return formatFigure(value / style.per, style.unit, { decimals: style.decimals });
  const time = timeOf(row, value, timing);
  return `${formatFigure(value, unitOf(value, row.unit))}${time === "" ? "" : `, ${time}`}`;
}

function differenceText(row: RasterDifference): string {
  if (row.same || typeof row.left !== "number" || typeof row.right !== "number") return "";
  const style = styles[row.figure] ?? { unit: row.unit, per: 1, decimals: 0 };
  const value = (row.right - row.left) / style.per;
  return formatFigure(value, unitOf(value, style.unit), { decimals: style.decimals, signed: true });
}

/** Every figure of two rasters, in words and units; counts with the time that they take. */
export function figureRows(left: RasterTiming, right: RasterTiming): readonly FigureRow[] {
  return compareRasters(left, right).map((row) => ({
    figure: words[row.figure] ?? row.figure,
    left: valueText(row, row.left, left),
    right: valueText(row, row.right, right),
    same: row.same,
    difference: differenceText(row),
  }));
}

/** "3 of 16 figures differ". */
export function differCount(rows: readonly FigureRow[]): string {
  const differing = rows.filter((row) => !row.same).length;
  if (differing === 0) return "No figure differs";
  return `${formatNumber(differing)} of ${formatNumber(rows.length)} figures differ`;
}
