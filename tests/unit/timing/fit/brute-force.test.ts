import fc from "fast-check";
import { expect, it } from "vitest";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { DeviceTimingLimits, RasterTiming } from "@/lib/timing/raster";
import { blankingGuide } from "@/lib/timing/fit/reference";
import { compareFound, rateRank, search, type Found } from "@/lib/timing/fit/search";
import { searchSpace } from "@/lib/timing/fit/search-space";
import { brokenDeviceLimits } from "@/lib/timing/fit/within-device";
import { fitsEnvelope } from "@/lib/timing/judge-envelope";
import { fieldBlankUs, fieldRateHz, lineRateHz } from "@/lib/timing/rates";
import type { FitWish } from "@/lib/timing/fit/fit-types";

type Case = {
  wish: FitWish;
  screen: ScreenEnvelope;
  device: DeviceTimingLimits & { clockHz: { min: number; max: number; step: number } };
};

/** Screens of one narrow band and devices of few clocks, so that every raster there is can be looked at. */
const smallCase: fc.Arbitrary<Case> = fc
  .record({
    activePx: fc.integer({ min: 90, max: 130 }),
    kind: fc.constantFrom([236, 60], [240, 59.94], [242, 60], [286, 50]),
    interlaced: fc.boolean(),
    band: fc.constantFrom([15_450, 15_892] as const, [15_500, 15_780] as const, [15_600, 15_750] as const),
    step: fc.constantFrom(1500, 4000, 9000),
    multiple: fc.constantFrom(1, 2),
    minSyncUs: fc.option(fc.constantFrom(4.5, 4.65, 4.8), { nil: undefined }),
    minFieldBlankUs: fc.option(fc.constantFrom(1207, 1400), { nil: undefined }),
  })
  .map(
    ({
      activePx,
      kind: [activeLines = 240, rate = 60],
      interlaced,
      band,
      step,
      multiple,
      minSyncUs,
      minFieldBlankUs,
    }) => ({
      wish: {
        activePx: activePx - (activePx % multiple),
        activeLines: interlaced ? activeLines * 2 : activeLines,
        fieldRateHz: rate,
        interlaced,
      },
      screen: {
        name: "small",
        bands: [{ lineRateHz: band, fieldRateHz: [48, 62] }],
        interlace: true,
        minSyncUs,
        minFieldBlankUs,
      },
      device: { clockHz: { min: 1_600_000, max: 2_700_000, step }, horizontalMultiple: multiple },
    }),
  );

const parts = ["frontPorch", "sync", "backPorch"] as const;

function within(value: number, [min, max]: readonly [number, number]): boolean {
  return value >= min * (1 - 1e-9) && value <= max * (1 + 1e-9);
}

/** Every split of `total` into three, the sync 1 at least. */
function* splits(total: number, multiple: number): Generator<{ frontPorch: number; sync: number; backPorch: number }> {
  for (let frontPorch = 0; frontPorch < total; frontPorch += multiple) {
    for (let sync = multiple; frontPorch + sync <= total; sync += multiple) {
      yield { frontPorch, sync, backPorch: total - frontPorch - sync };
    }
  }
}

/** The documented cost of a split: stiffness · (count − aim)² / aim over the sum of the aims; the sync is 8 times as stiff. */
function costOf(counts: Record<(typeof parts)[number], number>, aims: Record<(typeof parts)[number], number>): number {
  const sum = parts.reduce((total, part) => total + aims[part], 0);
  return (
    parts.reduce(
      (total, part) => total + ((part === "sync" ? 8 : 1) * (counts[part] - aims[part]) ** 2) / aims[part],
      0,
    ) / sum
  );
}

/** All rasters of one count of field lines, by nested loops over clocks, line totals and splits; the best of them. */
function bruteForce({ wish, screen, device }: Case, fieldLines: number): Found | undefined {
  const active = wish.interlaced ? wish.activeLines / 2 : wish.activeLines;
  const linesPerField = wish.interlaced ? fieldLines + 0.5 : fieldLines;
  const { min, max, step } = device.clockHz;
  const multiple = device.horizontalMultiple ?? 1;
  let best: Found | undefined;
  for (let pixelClockHz = min; pixelClockHz <= max; pixelClockHz += step) {
    for (let total = wish.activePx + multiple; total <= 1.5 * wish.activePx; total += multiple) {
      const rate = pixelClockHz / total;
      const field = rate / linesPerField;
      if (Math.abs(field / wish.fieldRateHz - 1) > 0.005) continue;
      if (!screen.bands.some((band) => within(rate, band.lineRateHz) && within(field, band.fieldRateHz))) continue;
      for (const candidate of candidates({ wish, screen, device }, { pixelClockHz, total, fieldLines, active })) {
        if (best === undefined || compareFound(candidate, best) < 0) best = candidate;
      }
    }
  }
  return best;
}

type Counts = { pixelClockHz: number; total: number; fieldLines: number; active: number };

function* candidates(
  { wish, screen, device }: Case,
  { pixelClockHz, total, fieldLines, active }: Counts,
): Generator<Found> {
  const multiple = device.horizontalMultiple ?? 1;
  const linesPerField = wish.interlaced ? fieldLines + 0.5 : fieldLines;
  const [band] = screen.bands;
  const line = band?.lineRateHz ?? [0, 0];
  const fastest =
    screen.minFieldBlankUs === undefined ? Infinity : ((linesPerField - active) * 1e6) / screen.minFieldBlankUs;
  const aimRate = Math.min(Math.max(wish.fieldRateHz * linesPerField, line[0]), Math.min(line[1], fastest));
  const guide = blankingGuide(aimRate, aimRate / linesPerField);
  const us = 1e6 / pixelClockHz;
  const blankUs = (total - wish.activePx) * us;
  const blankLines = fieldLines - active;
  if (!within(blankUs, guide.spanUs.blank) || !within(blankLines, guide.spanLines.blank)) return;
  const aims = { frontPorch: 0, sync: 0, backPorch: 0 };
  for (const part of parts) aims[part] = (guide.aimUs[part] * total * aimRate) / 1e6 / multiple;
  const downs = [...splits(blankLines, 1)].filter((down) =>
    parts.every((part) => within(down[part], guide.spanLines[part])),
  );
  for (const across of splits(total - wish.activePx, multiple)) {
    if (!parts.every((part) => within(across[part] * us, guide.spanUs[part]))) continue;
    for (const down of downs) {
      const timing: RasterTiming = {
        pixelClockHz,
        interlaced: wish.interlaced,
        horizontal: { active: wish.activePx, ...across, polarity: "negative" },
        vertical: { active, ...down, polarity: "negative" },
      };
      if (!fitsEnvelope(timing, screen) || brokenDeviceLimits(timing, device).length > 0) continue;
      const units = {
        frontPorch: across.frontPorch / multiple,
        sync: across.sync / multiple,
        backPorch: across.backPorch / multiple,
      };
      const fieldHz = fieldRateHz(timing);
      const porchCost = costOf(units, aims) + costOf(down, guide.aimLines);
      yield { timing, fieldRateHz: fieldHz, rateErrorHz: fieldHz - wish.fieldRateHz, porchCost };
    }
  }
}

it("is beaten by no raster of a space small enough to look at all of them", () => {
  let compared = 0;
  fc.assert(
    fc.property(smallCase, (one) => {
      const found = search(searchSpace(one));
      const active = one.wish.interlaced ? one.wish.activeLines / 2 : one.wish.activeLines;
      for (let fieldLines = active + 18; fieldLines <= active + 28; fieldLines += 1) {
        const best = bruteForce(one, fieldLines);
        const ours = found.find(
          ({ timing }) =>
            timing.vertical.active + parts.reduce((sum, part) => sum + timing.vertical[part], 0) === fieldLines,
        );
        expect(ours === undefined).toBe(best === undefined);
        if (ours === undefined || best === undefined) continue;
        compared += 1;
        expect(rateRank(ours.rateErrorHz)).toBe(rateRank(best.rateErrorHz));
        expect(ours.porchCost).toBeCloseTo(best.porchCost, 5);
        expect(Math.abs(ours.rateErrorHz)).toBeCloseTo(Math.abs(best.rateErrorHz), 7);
        expect(fieldBlankUs(ours.timing)).toBeGreaterThanOrEqual((one.screen.minFieldBlankUs ?? 0) * (1 - 1e-6));
        expect(lineRateHz(ours.timing)).toBeGreaterThan(15_000);
      }
    }),
    { numRuns: 16 },
  );
  expect(compared).toBeGreaterThan(10);
}, 60_000);
