/** Values are `min + n · step`. */
export type RulerRange = { readonly min: number; readonly max: number; readonly step: number };

/** Where a value lies on the track, 0 to 1; what lies outside sits at the end. */
export function fractionOf(value: number, range: RulerRange): number {
  if (range.max <= range.min) return 0;
  return Math.min(1, Math.max(0, (value - range.min) / (range.max - range.min)));
}

/** The step nearest to `value` within the range; ties go up. Decimals of the step are kept, not those of the arithmetic. */
export function snap(value: number, range: RulerRange): number {
  const last = Math.floor((range.max - range.min) / range.step + 1e-9);
  const count = Math.min(last, Math.max(0, Math.floor((value - range.min) / range.step + 0.5 + 1e-9)));
  return trim(range.min + count * range.step);
}

/** The value at a place on the track. */
export function valueAt(fraction: number, range: RulerRange): number {
  return snap(range.min + fraction * (range.max - range.min), range);
}

function trim(value: number): number {
  return Number(value.toFixed(9));
}

/** Decimals that show every step: 0.4 → 1, 1 → 0. */
export function stepDecimals(step: number): number {
  const text = trim(step).toString();
  const point = text.indexOf(".");
  return point < 0 ? 0 : text.length - point - 1;
}

const LARGE_STEPS = 10;

/** What a key does to a value, as ARIA's slider pattern has it, Shift for ten; null for a key that does nothing. */
export function keyStep(key: string, isShifted: boolean, value: number, range: RulerRange): number | null {
  const by = (count: number) => snap(value + count * range.step, range);
  const single = isShifted ? LARGE_STEPS : 1;
  switch (key) {
    case "ArrowRight":
    case "ArrowUp":
      return by(single);
    case "ArrowLeft":
    case "ArrowDown":
      return by(-single);
    case "PageUp":
      return by(LARGE_STEPS);
    case "PageDown":
      return by(-LARGE_STEPS);
    case "Home":
      return snap(range.min, range);
    case "End":
      return snap(range.max, range);
    default:
      return null;
  }
}

/** More ticks than this would run together. */
const MAX_TICKS = 24;

/**
 * Fractions at which ticks stand: on round values (1, 2 or 5 times a power of ten), never closer than a step.
 * @returns at most 25 of them, in order
 */
export function tickFractions(range: RulerRange): readonly number[] {
  const width = range.max - range.min;
  if (width <= 0) return [0];
  const every = Math.max(range.step, roundUp(width / MAX_TICKS));
  const first = Math.ceil(range.min / every - 1e-9);
  const last = Math.floor(range.max / every + 1e-9);
  return Array.from({ length: Math.max(0, last - first + 1) }, (_, index) =>
    fractionOf((first + index) * every, range),
  );
}

/** The next of 1, 2, 5, 10, … that is not smaller. */
export function roundUp(value: number): number {
  const power = 10 ** Math.floor(Math.log10(value));
  const lead = value / power;
  const nice = lead <= 1 + 1e-9 ? 1 : lead <= 2 + 1e-9 ? 2 : lead <= 5 + 1e-9 ? 5 : 10;
  return nice * power;
}

/** How a value lies to the stretch that is safe. */
export function standingOf(value: number, safe: readonly [number, number] | null): "safe" | "outside" {
  return safe !== null && value >= safe[0] - 1e-9 && value <= safe[1] + 1e-9 ? "safe" : "outside";
}
