import { figure, MINUS, NO_BREAK_SPACE, type FigureStyle } from "@/lib/timing/figure-text";

/** A number as it stands on screen. */
export const formatNumber = figure;

/** A number and its unit, joined so that no line ends between them. */
export function withUnit(figure: string, unit: string): string {
  return unit === "" ? figure : `${figure}${NO_BREAK_SPACE}${unit}`;
}

/** "12 px", "−3 lines", "97.6 %". */
export function formatFigure(value: number, unit: string, style: FigureStyle = {}): string {
  return withUnit(formatNumber(value, style), unit);
}

/** Line rate in Hz → "15.734 kHz". */
export function formatLineRate(lineRateHz: number): string {
  return formatFigure(lineRateHz / 1000, "kHz", { decimals: 3 });
}

/** Field rate in Hz → "60.05 Hz". */
export function formatFieldRate(fieldRateHz: number): string {
  return formatFigure(fieldRateHz, "Hz", { decimals: 2 });
}

/** Pixel clock in Hz → "27.000 MHz". */
export function formatClock(pixelClockHz: number): string {
  return formatFigure(pixelClockHz / 1e6, "MHz", { decimals: 3 });
}

/** µs → "4.59 µs". */
export function formatUs(us: number): string {
  return formatFigure(us, "µs", { decimals: 2 });
}

/** Two ends of a range → "15.45 … 15.89 kHz". */
export function formatSpan(span: readonly [number, number], unit: string, style: FigureStyle = {}): string {
  const [low, high] = span.map((end) => formatNumber(end, style));
  return withUnit(low === high ? String(low) : `${low} … ${high}`, unit);
}

/** Line rates of a band → "15.45 … 15.89 kHz". */
export function formatLineRateSpan(span: readonly [number, number]): string {
  return formatSpan([span[0] / 1000, span[1] / 1000], "kHz", { decimalsAtMost: 3 });
}

/** "1 slot", "3 slots". */
export function formatCount(count: number, one: string, many: string): string {
  return withUnit(formatNumber(count, { decimals: 0 }), count === 1 ? one : many);
}

/** Seconds left → "0:21"; never below 0:00. */
export function formatCountdown(seconds: number): string {
  const whole = Math.max(0, Math.ceil(seconds));
  return `${Math.floor(whole / 60)}:${String(whole % 60).padStart(2, "0")}`;
}

/**
 * Reads what somebody typed into a figure field: either minus, a comma or a point, spaces in thousands, a unit behind.
 * @returns null when it is no number
 */
export function parseFigure(typed: string): number | null {
  const text = typed
    .replace(/[\s\u2009\u00A0]/gu, "")
    .replace(MINUS, "-")
    .replace(",", ".");
  const match = /^([+-]?(?:\d+\.?\d*|\.\d+))(?:[a-zµ%Ω]*)$/iu.exec(text);
  return match === null ? null : Number(match[1]);
}
