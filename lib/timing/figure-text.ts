/** Thin space in thousands; a no-break space before a unit, so that no line ends between them. */
const THIN_SPACE = "\u2009";
export const NO_BREAK_SPACE = "\u00A0";
export const MINUS = "\u2212";

export type FigureStyle = {
  /** Exactly so many decimals. */
  readonly decimals?: number;
  /** At most so many decimals, trailing zeros dropped. Without either: 3 at most. */
  readonly decimalsAtMost?: number;
  /** A plus before a value above 0. */
  readonly signed?: boolean;
};

function digits(magnitude: number, style: FigureStyle): string {
  if (style.decimals !== undefined) return magnitude.toFixed(style.decimals);
  const text = magnitude.toFixed(style.decimalsAtMost ?? 3);
  return text.includes(".") ? text.replace(/\.?0+$/u, "") : text;
}

/**
 * A number as it stands in sentences and on screen: thin spaces in thousands ("1 440"), a real minus, no "−0".
 * What is no finite number is a dash.
 */
export function figure(value: number, style: FigureStyle = {}): string {
  if (!Number.isFinite(value)) return "–";
  const text = digits(Math.abs(value), style);
  const [whole = "0", fraction] = text.split(".");
  const grouped = whole.replace(/\B(?=(?:\d{3})+$)/gu, THIN_SPACE);
  const isZero = /^[0.]*$/u.test(text);
  const sign = isZero ? "" : value < 0 ? MINUS : style.signed === true ? "+" : "";
  return `${sign}${grouped}${fraction === undefined ? "" : `.${fraction}`}`;
}

/** A figure and its unit, joined so that no line ends between them. */
export function withUnit(value: number, unit: string, decimalsAtMost = 3): string {
  return `${figure(value, { decimalsAtMost })}${NO_BREAK_SPACE}${unit}`;
}

/** "15.734 kHz" */
export function kHz(hz: number): string {
  return withUnit(hz / 1000, "kHz");
}

/** "60.05 Hz" */
export function hz(value: number, decimalsAtMost = 2): string {
  return withUnit(value, "Hz", decimalsAtMost);
}

/** "27 MHz" */
export function mHz(value: number): string {
  return withUnit(value / 1e6, "MHz", 6);
}
