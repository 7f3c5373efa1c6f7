import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { isRasterAllowed } from "@/lib/profile/check/allowed-raster";
import type { Placement } from "@/lib/profile/document";
import { outsideRaster } from "@/lib/profile/fit-placement";
import { findMode } from "@/lib/profile/paths";
import { movePorches, porchStretch } from "@/lib/profile/porches";
import { numberLimit, roundTiming, stepCount, valueOfStep } from "@/lib/profile/round";
import { safeStretch } from "@/lib/profile/safe-stretch";
import { fieldRateHz, lineRateHz } from "@/lib/timing/rates";
import { anyTiming, bothTelevision, documentOf, lf8, monitor, oneSlot, television, timingOf } from "./samples";

const placed = (placement: Placement) => oneSlot({ placement });
const input = (document: ReturnType<typeof oneSlot>, screen = television) => ({ document, device: lf8, screen });

describe("safeStretch of a placement", () => {
  it("ends where the picture leaves the raster, every other value as planned", () => {
    const document = placed({ widthPct: 96, heightPct: 108, offsetPx: 12, offsetLines: -3 });
    expect(safeStretch("slots[1].placement.heightPct", input(document))).toEqual([80, 97.6]);
    expect(safeStretch("slots[1].placement.offsetPx", input(document))).toEqual([-29, 29]);
    // 96 % of 240 lines are 230: 5 are free on either side.
    expect(safeStretch("slots[1].placement.offsetLines", input(placed({ heightPct: 96 })))).toEqual([-5, 5]);
  });

  it("is null where no value is safe, and where the device has no such number", () => {
    expect(safeStretch("slots[1].placement.offsetLines", input(placed({ heightPct: 108 })))).toBeNull();
    expect(safeStretch("slots[1].placement.skewPct", input(placed({})))).toBeNull();
    const { "slots[*].placement.offsetPx": _absent, ...numbers } = lf8.numbers;
    expect(
      safeStretch("slots[1].placement.offsetPx", { ...input(placed({})), device: { ...lf8, numbers } }),
    ).toBeNull();
  });

  it("equals the steps that brute force finds", () => {
    const size = fc.integer({ min: 0, max: 100 }).map((n) => Number((80 + n * 0.4).toFixed(1)));
    fc.assert(
      fc.property(size, fc.integer({ min: -20, max: 20 }), (heightPct, offsetLines) => {
        const document = placed({ heightPct, offsetLines });
        const pct = Array.from({ length: 101 }, (_, n) => Number((80 + n * 0.4).toFixed(1))).filter((value) => {
          const { before, after } = outsideRaster(240, value, offsetLines);
          return before + after === 0;
        });
        expect(safeStretch("slots[1].placement.heightPct", input(document))).toEqual(
          pct.length === 0 ? null : [pct[0], pct.at(-1)],
        );
        const offsets = Array.from({ length: 41 }, (_, n) => n - 20).filter((value) => {
          const { before, after } = outsideRaster(240, heightPct, value);
          return before + after === 0;
        });
        expect(safeStretch("slots[1].placement.offsetLines", input(document))).toEqual(
          offsets.length === 0 ? null : [offsets[0], offsets.at(-1)],
        );
      }),
    );
  });
});

describe("safeStretch of a timing", () => {
  const fields = [
    "horizontal.active",
    "horizontal.frontPorch",
    "horizontal.sync",
    "horizontal.backPorch",
    "vertical.active",
    "vertical.frontPorch",
    "vertical.sync",
    "vertical.backPorch",
    "pixelClockHz",
  ];
  const clocks = fields.map((field) => [field, `modes[a].timing.${field}`] as const);

  it.each(clocks)("of %s equals the stretch that brute force finds around the value", (field, path) => {
    const limit = numberLimit(lf8, `modes[*].timing.${field}`);
    if (!limit) throw new Error("no limit");
    fc.assert(
      fc.property(anyTiming, fc.constantFrom(television, bothTelevision, monitor), (timing, screen) => {
        const document = oneSlot({}, roundTiming(timing, lf8));
        const allowed = Array.from({ length: stepCount(limit) + 1 }, (_, step) => valueOfStep(limit, step)).map(
          (value) => {
            const after = findMode(applyOne(document, path, value), "a")?.timing;
            return after !== undefined && isRasterAllowed(after, screen) ? value : null;
          },
        );
        const stretch = safeStretch(path, { document, device: lf8, screen });
        if (stretch === null) {
          expect(allowed.every((value) => value === null)).toBe(true);
          return;
        }
        const [from, to] = [allowed.indexOf(stretch[0]), allowed.indexOf(stretch[1])];
        expect(from).toBeGreaterThanOrEqual(0);
        expect(allowed.slice(from, to + 1).every((value) => value !== null)).toBe(true);
        expect(allowed[from - 1] ?? null).toBeNull();
        expect(allowed[to + 1] ?? null).toBeNull();
      }),
      { numRuns: 8 },
    );
  });

  const applyOne = (document: ReturnType<typeof oneSlot>, path: string, value: number) => {
    const timing = findMode(document, "a")?.timing ?? timingOf("240p60");
    const [axis = "", part = ""] = path.slice("modes[a].timing.".length).split(".");
    const next =
      axis === "pixelClockHz"
        ? { ...timing, pixelClockHz: value }
        : { ...timing, [axis]: { ...timing[axis as "horizontal"], [part]: value } };
    return documentOf({ modes: [{ key: "a", timing: next }] });
  };

  it("holds the pictures of the mode's slots inside when its active part changes", () => {
    const document = oneSlot({ placement: { heightPct: 80, offsetLines: 20 } });
    const stretch = safeStretch("modes[a].timing.vertical.active", input(document));
    // 80 % of n lines, 20 lower: inside while ⌊(n − 0.8·n) / 2⌋ is 20 at least.
    expect(stretch?.[0]).toBeGreaterThanOrEqual(200);
    expect(safeStretch("modes[a].timing.vertical.active", input(oneSlot({})))?.[1]).toBe(stretch?.[1]);
  });
});

describe("safeStretch of the rest", () => {
  it("leaves something of every source to trim, and gives the device's range where nothing can go wrong", () => {
    const document = oneSlot({ expects: { activePx: 256, activeLines: 100, interlaced: false, fieldRateHz: 60 } });
    expect(safeStretch("everywhere.trim.topLines", input(document))).toEqual([-16, 99]);
    expect(safeStretch("everywhere.trim.leftPx", input(oneSlot({})))).toEqual([-32, 255]);
    expect(safeStretch("slots[1].colour.contrastPct", input(oneSlot({})))).toEqual([50, 150]);
  });

  it("does not need a screen", () => {
    expect(safeStretch("modes[a].timing.horizontal.sync", { document: oneSlot({}), device: lf8 })).toEqual([1, 1023]);
  });
});

describe("movePorches", () => {
  const timing = timingOf("240p60");

  it("one px right takes 1 from the front porch and gives it to the back porch; down likewise", () => {
    const moved = movePorches(timing, { rightPx: 3, downLines: -2 });
    if (!moved.ok) throw new Error(moved.error.code);
    expect(moved.value.horizontal).toMatchObject({ active: 1440, frontPorch: 35, sync: 124, backPorch: 117 });
    expect(moved.value.vertical).toMatchObject({ active: 240, frontPorch: 6, sync: 3, backPorch: 13 });
  });

  it("wider takes from both porches and adds to active, in even steps", () => {
    const wider = movePorches(timing, { widerPx: 4 });
    expect(wider.ok && wider.value.horizontal).toMatchObject({ active: 1444, frontPorch: 36, backPorch: 112 });
    expect(movePorches(timing, { widerPx: 3 })).toEqual({ ok: false, error: { code: "odd-step", axis: "horizontal" } });
  });

  it("refuses to use a porch up", () => {
    expect(movePorches(timing, { rightPx: 39 })).toEqual({ ok: false, error: { code: "used-up", axis: "horizontal" } });
    expect(movePorches(timing, { downLines: -16 })).toEqual({
      ok: false,
      error: { code: "used-up", axis: "vertical" },
    });
    expect(movePorches(timing, { tallerLines: -240 })).toEqual({
      ok: false,
      error: { code: "nothing-active", axis: "vertical" },
    });
  });

  it("keeps totals, sync and all rates, and is undone by its opposite", () => {
    const step = fc.integer({ min: -20, max: 20 });
    fc.assert(
      fc.property(anyTiming, step, step, step, (from, rightPx, downLines, half) => {
        const there = movePorches(from, { rightPx, downLines, widerPx: 2 * half });
        fc.pre(there.ok);
        if (!there.ok) return;
        expect([lineRateHz(there.value), fieldRateHz(there.value)]).toEqual([lineRateHz(from), fieldRateHz(from)]);
        expect(there.value.horizontal.sync).toBe(from.horizontal.sync);
        const back = movePorches(there.value, { rightPx: -rightPx, downLines: -downLines, widerPx: -2 * half });
        expect(back).toEqual({ ok: true, value: from });
      }),
    );
  });

  it("says how far a move can go on a screen", () => {
    expect(porchStretch(timing, "rightPx", television)).toEqual([-114, 38]);
    const screen = { ...television, minBackPorchUs: 4 };
    // 4 µs are 108 clocks of 27 MHz: 6 of the 114 can go.
    expect(porchStretch(timing, "rightPx", screen)).toEqual([-6, 38]);
    expect(porchStretch(timing, "downLines", monitor)).toBeNull();
  });
});
