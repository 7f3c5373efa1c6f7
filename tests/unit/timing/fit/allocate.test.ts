import fc from "fast-check";
import { expect, it } from "vitest";
import { allocate, type Share } from "@/lib/timing/fit/allocate";

const share = fc
  .record({
    aim: fc.double({ min: 0.2, max: 12, noNaN: true }),
    min: fc.integer({ min: 0, max: 6 }),
    room: fc.integer({ min: 0, max: 10 }),
    stiffness: fc.constantFrom(1, 8),
  })
  .map(({ aim, min, room, stiffness }): Share => ({ aim, min, max: min + room, stiffness }));

/** Every split there is. */
function leastCost(shares: readonly Share[], total: number): number | undefined {
  const [a, b, c] = shares;
  if (a === undefined || b === undefined || c === undefined) return undefined;
  const cost = (one: Share, count: number) => (one.stiffness * (count - one.aim) ** 2) / one.aim;
  let least: number | undefined;
  for (let first = a.min; first <= a.max; first += 1) {
    for (let second = b.min; second <= b.max; second += 1) {
      const third = total - first - second;
      if (third < c.min || third > c.max) continue;
      const sum = cost(a, first) + cost(b, second) + cost(c, third);
      if (least === undefined || sum < least) least = sum;
    }
  }
  return least;
}

it("costs no more than the best of all splits, and finds one exactly where there is one", () => {
  fc.assert(
    fc.property(fc.tuple(share, share, share), fc.integer({ min: 0, max: 40 }), (shares, total) => {
      const best = leastCost(shares, total);
      const ours = allocate(shares, total);
      expect(ours === undefined).toBe(best === undefined);
      if (ours === undefined || best === undefined) return;
      expect(ours.counts.reduce((sum, count) => sum + count, 0)).toBe(total);
      shares.forEach(({ min, max }, index) => {
        expect(ours.counts[index]).toBeGreaterThanOrEqual(min);
        expect(ours.counts[index]).toBeLessThanOrEqual(max);
      });
      expect(ours.cost).toBeCloseTo(best, 9);
    }),
    { numRuns: 500 },
  );
});
