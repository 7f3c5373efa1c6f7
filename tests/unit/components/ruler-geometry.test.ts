import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  fractionOf,
  keyStep,
  snap,
  standingOf,
  stepDecimals,
  tickFractions,
  valueAt,
} from "@/components/video/ruler-geometry";

const range = { min: -64, max: 63, step: 1 };
const width = { min: 80, max: 120, step: 0.4 };

const anyRange = fc
  .record({
    min: fc.integer({ min: -1000, max: 1000 }),
    steps: fc.integer({ min: 1, max: 500 }),
    step: fc.constantFrom(0.1, 0.4, 0.5, 1, 2, 8),
  })
  .map(({ min, steps, step }) => ({ min, max: Number((min + steps * step).toFixed(6)), step }));

describe("range ruler", () => {
  it("lands on the device's steps, anchored at the least value, ties upward", () => {
    expect(snap(95.1, width)).toBe(95.2);
    expect(snap(95.0, width)).toBe(95.2);
    expect(snap(0.5, range)).toBe(1);
    expect(snap(-0.5, range)).toBe(0);
  });

  it("never leaves the range, and is stable", () => {
    fc.assert(
      fc.property(anyRange, fc.double({ min: -5000, max: 5000, noNaN: true }), (some, value) => {
        const held = snap(value, some);
        expect(held).toBeGreaterThanOrEqual(some.min);
        expect(held).toBeLessThanOrEqual(some.max + 1e-9);
        expect(snap(held, some)).toBe(held);
      }),
    );
  });

  it("finds the value again at the place where it drew it", () => {
    fc.assert(
      fc.property(anyRange, fc.integer({ min: 0, max: 500 }), (some, count) => {
        const value = snap(some.min + count * some.step, some);
        expect(valueAt(fractionOf(value, some), some)).toBe(value);
      }),
    );
  });

  it("keeps what lies outside at the end of the track", () => {
    expect(fractionOf(500, range)).toBe(1);
    expect(fractionOf(-500, range)).toBe(0);
  });

  // Source: ARIA Authoring Practices Guide, slider pattern; Shift for ten is the project's own.
  it("moves by keys as a slider does", () => {
    expect(keyStep("ArrowRight", false, 12, range)).toBe(13);
    expect(keyStep("ArrowDown", false, 12, range)).toBe(11);
    expect(keyStep("ArrowLeft", true, 12, range)).toBe(2);
    expect(keyStep("PageUp", false, 12, range)).toBe(22);
    expect(keyStep("Home", false, 12, range)).toBe(-64);
    expect(keyStep("End", false, 12, range)).toBe(63);
    expect(keyStep("End", false, 100, width)).toBe(120);
    expect(keyStep("a", false, 12, range)).toBeNull();
  });

  it("shows the decimals that tell two steps apart", () => {
    expect([1, 0.4, 0.05, 8].map(stepDecimals)).toEqual([0, 1, 2, 0]);
  });

  it("draws at most 25 ticks, in order, all of them on the track", () => {
    fc.assert(
      fc.property(anyRange, (some) => {
        const ticks = tickFractions(some);
        expect(ticks.length).toBeLessThanOrEqual(25);
        expect([...ticks].sort((a, b) => a - b)).toEqual(ticks);
        expect(ticks.every((tick) => tick >= 0 && tick <= 1)).toBe(true);
      }),
    );
  });

  it("counts the ends of the safe stretch as safe, and nothing where no stretch is", () => {
    expect(standingOf(97.6, [80, 97.6])).toBe("safe");
    expect(standingOf(98, [80, 97.6])).toBe("outside");
    expect(standingOf(98, null)).toBe("outside");
  });
});
