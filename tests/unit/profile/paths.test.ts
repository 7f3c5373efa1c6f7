import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { compareDocuments, unitOf } from "@/lib/profile/compare";
import { neutralSettings } from "@/lib/profile/neutral-settings";
import { applyPatch, getValue, modePath, parsePath, patternOf, slotPath } from "@/lib/profile/paths";
import { anyProfile, documentOf, oneSlot, timingOf } from "./samples";

describe("paths", () => {
  it("names slots by number and modes by key, and finds the pattern of each", () => {
    expect(slotPath(4, "placement.offsetPx")).toBe("slots[4].placement.offsetPx");
    expect(modePath("a", "timing")).toBe("modes[a].timing");
    expect(patternOf("slots[4].placement.offsetPx")).toBe("slots[*].placement.offsetPx");
    expect(patternOf("everywhere.trim.leftPx")).toBe("everywhere.trim.leftPx");
    expect(parsePath("slots[4]]")).toBeNull();
    expect(parsePath("slots[4].a[0]")).toBeNull();
  });

  it("reads every mode key back, brackets and backslashes too", () => {
    fc.assert(
      fc.property(fc.string({ minLength: 1, maxLength: 64 }), (key) => {
        expect(parsePath(modePath(key, "timing.horizontal.sync"))).toEqual({
          scope: "mode",
          key,
          fields: ["timing", "horizontal", "sync"],
        });
      }),
    );
  });
});

describe("applyPatch", () => {
  const document = oneSlot({ placement: { widthPct: 96 } });

  it("sets a value, takes one out, and leaves the rest and the original alone", () => {
    const before = structuredClone(document);
    const after = applyPatch(document, [
      { path: "slots[1].placement.heightPct", value: 97.6 },
      { path: "slots[1].placement.widthPct", value: null },
      { path: "modes[a].timing.horizontal.sync", value: 100 },
      { path: "everywhere.trim.leftPx", value: 8 },
    ]);
    expect(after.slots).toEqual([{ number: 1, mode: "a", placement: { heightPct: 97.6 } }]);
    expect(getValue(after, "modes[a].timing.horizontal.sync")).toBe(100);
    expect(after.everywhere).toEqual({ trim: { leftPx: 8 } });
    expect(document).toEqual(before);
  });

  it("adds a slot that was not there, in order", () => {
    const after = applyPatch(oneSlot({ number: 5 }), [{ path: "slots[2].name", value: "Lobby" }]);
    expect(after.slots?.map(({ number }) => number)).toEqual([2, 5]);
  });

  it("refuses a path that is no setting, a value of another kind, and a timing in part", () => {
    expect(() => applyPatch(document, [{ path: "slots[1].number", value: 2 }])).toThrow(RangeError);
    expect(() => applyPatch(document, [{ path: "__proto__.polluted", value: 1 }])).toThrow(RangeError);
    expect(() => applyPatch(document, [{ path: "slots[1].placement.widthPct", value: "wide" }])).toThrow();
    expect(() => applyPatch(document, [{ path: "modes[b].timing.horizontal.sync", value: 1 }])).toThrow();
    expect(() => applyPatch(document, [{ path: "modes[a].timing.horizontal.sync", value: null }])).toThrow();
  });
});

describe("compareDocuments", () => {
  it("tells every value that differs with its unit, in the document's order, and nothing of provenance", () => {
    const left = oneSlot({ name: "A", placement: { offsetPx: 0, heightPct: 98 } });
    const right = documentOf({
      everywhere: { trim: { topLines: 2 } },
      modes: [{ key: "a", timing: { ...timingOf("240p60"), pixelClockHz: 27_050_000 } }],
      slots: [
        { number: 1, mode: "a", name: "A", placement: { offsetPx: 12 }, syncKind: "composite" },
        { number: 2, name: "B" },
      ],
      provenance: { by: "Imke R." },
    });
    expect(compareDocuments(left, right)).toEqual([
      { path: "everywhere.trim.topLines", left: null, right: 2, unit: "lines" },
      { path: "modes[a].timing.pixelClockHz", left: 27_000_000, right: 27_050_000, unit: "Hz" },
      { path: "slots[1].placement.heightPct", left: 98, right: null, unit: "%" },
      { path: "slots[1].placement.offsetPx", left: 0, right: 12, unit: "px" },
      { path: "slots[1].syncKind", left: null, right: "composite", unit: "" },
      { path: "slots[2].name", left: null, right: "B", unit: "" },
    ]);
  });

  it("finds nothing in equal documents, and the same paths from either side", () => {
    fc.assert(
      fc.property(anyProfile, anyProfile, (left, right) => {
        expect(compareDocuments(left, structuredClone(left))).toEqual([]);
        const paths = (changes: ReturnType<typeof compareDocuments>) => changes.map(({ path }) => path).sort();
        expect(paths(compareDocuments(left, right))).toEqual(paths(compareDocuments(right, left)));
      }),
      { numRuns: 30 },
    );
  });

  it("gives the left's values back when each change is undone on the right", () => {
    fc.assert(
      fc.property(anyProfile, (left) => {
        const patch = [
          { path: "slots[1].placement.widthPct", value: 88 },
          { path: "slots[1].name", value: "changed" },
        ];
        const right = applyPatch(left, patch);
        const undo = compareDocuments(left, right).map(({ path, left: value }) => ({
          path,
          value: value as string | number | null,
        }));
        const known = (left.slots ?? []).some(({ number }) => number === 1);
        const back = applyPatch(right, undo);
        expect(compareDocuments(left, known ? back : { ...back, slots: left.slots })).toEqual([]);
      }),
      { numRuns: 50 },
    );
  });

  it("states the units that settings are held in", () => {
    for (const { pattern, unit } of neutralSettings) {
      if (unit !== undefined) expect(unitOf(pattern)).toBe(unit);
    }
    expect(unitOf("madeFor.screen.visiblePct.left")).toBe("%");
    expect(unitOf("madeFor.screen.bands[0].lineRateHz[1]")).toBe("Hz");
  });
});
