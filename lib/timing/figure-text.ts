/** Thin space in thousands; a no-break space before a unit, so that no line ends between them. */
const THIN_SPACE = "\u2009";
const NO_BREAK_SPACE = "\u00A0";
const MINUS = "\u2212";

/** A figure as sentences write it: at most so many decimals, thin spaces in thousands, a real minus. */
export function figure(value: number, decimalsAtMost = 3): string {
  const text = Math.abs(value).toFixed(decimalsAtMost);
  const short = text.includes(".") ? text.replace(/\.?0+$/u, "") : text;
  const [whole = "0", fraction] = short.split(".");
  const grouped = whole.replace(/\B(?=(?:\d{3})+$)/gu, THIN_SPACE);
  const sign = value < 0 && !/^[0.]*$/u.test(short) ? MINUS : "";
  return `${sign}${grouped}${fraction === undefined ? "" : `.${fraction}`}`;
}

/** A figure and its unit. */
export function withUnit(value: number, unit: string, decimalsAtMost = 3): string {
  return `${figure(value, decimalsAtMost)}${NO_BREAK_SPACE}${unit}`;
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
