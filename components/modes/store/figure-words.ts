import type { EditFigure } from "@/lib/timing/fit/editable-figures";
import { formatNumber, withUnit } from "@/components/ui/figures";

export type FigureWord = {
  /** As a label: "Refresh". */
  readonly label: string;
  /** Inside a sentence: "the refresh". */
  readonly inSentence: string;
  readonly unit: string;
  /** Hz in a Hz, kHz or MHz of the page; 1 for counts. */
  readonly scale: number;
  readonly decimals: number;
  /** One press of an arrow key, in the page's own unit. */
  readonly step: number;
  /** The figure's name in an address. */
  readonly key: string;
};

/** How each figure is called and shown. */
export const figureWords: Readonly<Record<EditFigure, FigureWord>> = {
  activeLines: { label: "Lines", inSentence: "the lines", unit: "lines", scale: 1, decimals: 0, step: 1, key: "lines" },
  fieldRateHz: {
    label: "Refresh",
    inSentence: "the refresh",
    unit: "Hz",
    scale: 1,
    decimals: 2,
    step: 0.1,
    key: "rate",
  },
  activePx: { label: "Width", inSentence: "the width", unit: "px", scale: 1, decimals: 0, step: 8, key: "width" },
  pixelClockHz: {
    label: "Clock",
    inSentence: "the clock",
    unit: "MHz",
    scale: 1e6,
    decimals: 3,
    step: 0.05,
    key: "clock",
  },
  lineRateHz: {
    label: "Line rate",
    inSentence: "the line rate",
    unit: "kHz",
    scale: 1000,
    decimals: 3,
    step: 0.01,
    key: "linerate",
  },
  lineTotal: {
    label: "Line in all",
    inSentence: "the clocks of a line",
    unit: "clocks",
    scale: 1,
    decimals: 0,
    step: 1,
    key: "linetotal",
  },
  fieldLines: {
    label: "Field in all",
    inSentence: "the lines of a field",
    unit: "lines",
    scale: 1,
    decimals: 0,
    step: 1,
    key: "fieldlines",
  },
  "horizontal.frontPorch": {
    label: "Front porch",
    inSentence: "the front porch",
    unit: "clocks",
    scale: 1,
    decimals: 0,
    step: 1,
    key: "hfront",
  },
  "horizontal.sync": {
    label: "Sync",
    inSentence: "the sync",
    unit: "clocks",
    scale: 1,
    decimals: 0,
    step: 1,
    key: "hsync",
  },
  "horizontal.backPorch": {
    label: "Back porch",
    inSentence: "the back porch",
    unit: "clocks",
    scale: 1,
    decimals: 0,
    step: 1,
    key: "hback",
  },
  "vertical.frontPorch": {
    label: "Front porch down",
    inSentence: "the front porch down",
    unit: "lines",
    scale: 1,
    decimals: 0,
    step: 1,
    key: "vfront",
  },
  "vertical.sync": {
    label: "Sync down",
    inSentence: "the sync down",
    unit: "lines",
    scale: 1,
    decimals: 0,
    step: 1,
    key: "vsync",
  },
  "vertical.backPorch": {
    label: "Back porch down",
    inSentence: "the back porch down",
    unit: "lines",
    scale: 1,
    decimals: 0,
    step: 1,
    key: "vback",
  },
};

/** A figure without its unit, as its field shows it; a refresh of three decimals keeps them. */
export function figureText(figure: EditFigure, value: number): string {
  const { scale, decimals } = figureWords[figure];
  const shown = value / scale;
  const isFiner = figure === "fieldRateHz" && !shown.toFixed(decimals + 1).endsWith("0");
  return formatNumber(shown, { decimals: isFiner ? decimals + 1 : decimals });
}

/** "60.05 Hz", "1 716 clocks". */
export function figureWithUnit(figure: EditFigure, value: number): string {
  return withUnit(figureText(figure, value), figureWords[figure].unit);
}
