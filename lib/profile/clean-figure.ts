/**
 * A figure without the noise of binary fractions: 960 · 0.1 is 96.00000000000001. Twelve digits are more than any device
 * counts in; a whole number of so few has none, and most settings are whole. Zero comes back without a sign.
 */
export function cleanFigure(value: number): number {
  return (Number.isInteger(value) && Math.abs(value) < 1e12 ? value : Number(value.toPrecision(12))) + 0;
}
