import type { Span } from "@/lib/timing/envelope";

/** Limits are inclusive to this share of their value. */
export const LIMIT_TOLERANCE = 1e-6;

/** `value` is not below `min`, to 1 part in 10⁶. */
export function atLeast(value: number, min: number): boolean {
  return value >= min - Math.abs(min) * LIMIT_TOLERANCE;
}

/** `value` is not above `max`, to 1 part in 10⁶. */
export function atMost(value: number, max: number): boolean {
  return value <= max + Math.abs(max) * LIMIT_TOLERANCE;
}

/** `value` lies in the span, ends included, to 1 part in 10⁶. */
export function inSpan(value: number, span: Span): boolean {
  return atLeast(value, span[0]) && atMost(value, span[1]);
}

/** The value of the span that lies nearest to `value`. */
export function nearestInSpan(value: number, span: Span): number {
  return Math.min(Math.max(value, span[0]), span[1]);
}

/** The least span that holds all `values`; undefined for none. */
export function spanOf(values: readonly number[]): Span | undefined {
  if (values.length === 0) return undefined;
  return [Math.min(...values), Math.max(...values)];
}
