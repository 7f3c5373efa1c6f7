import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { applyPatch } from "@/lib/profile/paths";
import { isInRange, roundDocument, roundTiming, roundToStep } from "@/lib/profile/round";
import { anyProfile, lf8, oneSlot, timingOf } from "./samples";

const limit = (min: number, max: number, step: number) => ({ min, max, step });

describe("roundToStep", () => {
  it("anchors steps at the minimum and rounds ties up", () => {
    expect(roundToStep(95.1, limit(80, 120, 0.4))).toBe(95.2);
    expect(roundToStep(95.0, limit(80, 120, 0.4))).toBe(95.2);
    expect(roundToStep(2, limit(1, 9, 2))).toBe(3);
    expect(roundToStep(-2, limit(-3, 9, 2))).toBe(-1);
    expect(roundToStep(0.3, limit(0.1, 1, 0.4))).toBe(0.5);
  });

  it("holds what lies past the last step but within the range as the last step, and leaves the rest out of range", () => {
    const odd = limit(0, 10, 3);
    expect(roundToStep(10, odd)).toBe(9);
    expect(isInRange(roundToStep(10.2, limit(0, 10, 5)), limit(0, 10, 5))).toBe(true);
    expect(isInRange(roundToStep(13, odd), odd)).toBe(false);
    expect(isInRange(roundToStep(-2, odd), odd)).toBe(false);
  });

  it("gives a value on the steps, half a step away at most, and the same again", () => {
    const anyLimit = fc.record({
      min: fc.integer({ min: -500, max: 500 }),
      count: fc.integer({ min: 1, max: 400 }),
      step: fc.constantFrom(0.1, 0.4, 0.5, 1, 2, 5, 50),
    });
    fc.assert(
      fc.property(anyLimit, fc.double({ min: 0, max: 1, noNaN: true }), ({ min, count, step }, share) => {
        const of = limit(min, Number((min + count * step).toPrecision(12)), step);
        const value = of.min + share * (of.max - of.min);
        const held = roundToStep(value, of);
        expect(Math.abs(held - value)).toBeLessThanOrEqual(step / 2 + 1e-6);
        expect(isInRange(held, of)).toBe(true);
        expect(roundToStep(held, of)).toBe(held);
      }),
    );
  });
});

describe("roundDocument", () => {
  it("says what it rounded, what is out of range and what the device lacks, and takes the last out", () => {
    const document = applyPatch(oneSlot({ placement: { widthPct: 95.1, heightPct: 130 }, input: "aux 9" }), [
      { path: "modes[a].timing.pixelClockHz", value: 27_010_000 },
    ]);
    const { document: held, rounded, outOfRange, lacks } = roundDocument(document, lf8);
    expect(rounded.map(({ path, asked, held: now }) => [path, asked, now])).toEqual([
      ["modes[a].timing.pixelClockHz", 27_010_000, 27_000_000],
      ["slots[1].placement.widthPct", 95.1, 95.2],
    ]);
    expect(outOfRange.map(({ path }) => path)).toEqual(["slots[1].placement.heightPct"]);
    expect(lacks.map(({ path }) => path)).toEqual(["slots[1].input"]);
    expect(held.slots?.[0]).toEqual({ number: 1, mode: "a", placement: { widthPct: 95.2, heightPct: 130 } });
  });

  it("keeps a timing whole although the device has no word for a part of it", () => {
    const { "modes[*].timing.vertical.sync": _sync, ...numbers } = lf8.numbers;
    expect(roundTiming(timingOf("240p60"), { ...lf8, numbers })).toEqual(timingOf("240p60"));
    expect(roundDocument(oneSlot({}), { ...lf8, numbers, choices: {} }).document.modes?.[0]?.timing).toEqual(
      timingOf("240p60"),
    );
  });

  it("changes nothing the second time", () => {
    fc.assert(
      fc.property(anyProfile, fc.double({ min: 70, max: 130, noNaN: true }), (document, widthPct) => {
        const once = roundDocument(
          applyPatch(document, [{ path: "slots[1].placement.widthPct", value: widthPct }]),
          lf8,
        );
        const twice = roundDocument(once.document, lf8);
        expect(twice.document).toEqual(once.document);
        expect(twice.rounded).toEqual([]);
        expect(twice.lacks).toEqual([]);
      }),
      { numRuns: 40 },
    );
  });
});
