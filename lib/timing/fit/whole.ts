import type { Span } from "@/lib/timing/envelope";
import { LIMIT_TOLERANCE } from "@/lib/timing/span";

/** Half of what a limit may be off by: what is found here is inside for every check that comes after. */
export const SLACK = LIMIT_TOLERANCE / 2;

/** The least whole number that is not below `value`, slack aside. */
export function atLeastWhole(value: number): number {
  return Math.ceil(value * (1 - SLACK) - 1e-12);
}

/** The largest whole number that is not above `value`, slack aside. */
export function atMostWhole(value: number): number {
  return Math.floor(value * (1 + SLACK) + 1e-12);
}

/** What two spans have in common; crossed where that is nothing. */
export function intersect(a: Span, b: Span): Span {
  return [Math.max(a[0], b[0]), Math.min(a[1], b[1])];
}

/** The span, its ends moved out by the slack. */
export function slackened(span: Span): Span {
  return [span[0] * (1 - SLACK), span[1] * (1 + SLACK)];
}

/** The value of the span that lies nearest to `value`. */
export function clamp(value: number, [min, max]: Span): number {
  return Math.min(Math.max(value, min), max);
}
