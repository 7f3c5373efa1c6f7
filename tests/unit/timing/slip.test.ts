import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { fitsEnvelope } from "@/lib/timing/judge-envelope";
import { brokenDeviceLimits } from "@/lib/timing/fit/within-device";
import { fieldRateHz, lineRateHz } from "@/lib/timing/rates";
import { screenPresets } from "@/lib/timing/screen-presets";
import { closeSlip } from "@/lib/timing/slip/close-slip";
import { followInput, rateSlip } from "@/lib/timing/slip/rate-slip";
import { standardRaster } from "@/lib/timing/standards";

const { timing } = standardRaster("240p60");
const television = screenPresets.find(({ id }) => id === "bt470-525")?.envelope;

describe("rateSlip", () => {
  it("is one frame every 1 / difference seconds, repeated where more leave than arrive", () => {
    // By hand: 60.054449 − 60 = 0.054449 Hz, so a frame repeats every 18.4 s; 59.94 against 60 drops one in 16.7 s.
    expect(rateSlip(60, fieldRateHz(timing))).toMatchObject({ kind: "repeats" });
    expect(rateSlip(60, fieldRateHz(timing)).everyS).toBeCloseTo(18.366, 3);
    expect(rateSlip(60, 60_000 / 1001)).toMatchObject({ kind: "drops" });
    expect(rateSlip(60, 60_000 / 1001).everyS).toBeCloseTo(16.683, 3);
  });

  it("is none where it comes to less than a frame a day", () => {
    expect(rateSlip(60, 60 + 1e-6)).toMatchObject({ kind: "none" });
    expect(rateSlip(60, 60 + 1e-6).everyS).toBeUndefined();
  });

  it("is an interval where the source's rate is only known roughly", () => {
    expect(rateSlip(60, 60.05, 0.01).everyRangeS?.[0]).toBeCloseTo(1 / 0.06, 6);
    expect(rateSlip(60, 60.05, 0.01).everyRangeS?.[1]).toBeCloseTo(1 / 0.04, 6);
    expect(rateSlip(60, 60.05, 0.1).everyRangeS?.[1]).toBe(Infinity);
  });
});

describe("a device whose output follows the input", () => {
  it("puts the source's rate out, at a line rate that is checked", () => {
    const followed = followInput(timing, 50);
    expect(fieldRateHz(followed)).toBeCloseTo(50, 9);
    expect(lineRateHz(followed)).toBeCloseTo(13_100, 6);
    expect(television !== undefined && fitsEnvelope(followed, television)).toBe(false);
    expect(closeSlip(timing, 50, { outputClock: "input" })).toMatchObject({ now: { kind: "none" }, cures: [] });
  });
});

describe("closeSlip", () => {
  const device = { clockHz: { min: 5e6, max: 165e6, step: 50_000 } };

  it("names the clock that would close it", () => {
    // By hand: 60 · 262 · 1716 = 26 975 520.
    expect(closeSlip(timing, 60, device).exactClockHz).toBe(26_975_520);
    expect(closeSlip(timing, 60, {}).cures[0]).toMatchObject({
      clocksAdded: 0,
      timing: { pixelClockHz: 26_975_520 },
      slip: { kind: "none" },
    });
  });

  it("finds what the device can do, which is nearer than now and inside every limit", () => {
    if (television === undefined) throw new Error("no such preset");
    fc.assert(
      fc.property(
        fc.double({ min: 59.8, max: 60.2, noNaN: true }),
        fc.constantFrom(1, 2, 8),
        (inHz, horizontalMultiple) => {
          const limits = { ...device, horizontalMultiple: horizontalMultiple === 8 ? undefined : horizontalMultiple };
          const { now, cures } = closeSlip(timing, inHz, limits, television);
          for (const cure of cures) {
            expect(Math.abs(cure.fieldRateHz - inHz)).toBeLessThan(Math.abs(now.differenceHz));
            expect(fieldRateHz(cure.timing)).toBe(cure.fieldRateHz);
            expect(fitsEnvelope(cure.timing, television)).toBe(true);
            expect(brokenDeviceLimits(cure.timing, limits)).toEqual([]);
          }
        },
      ),
    );
  });

  it("slips far less often after than before", () => {
    const { now, cures } = closeSlip(timing, 60, device, television);
    expect(now.everyS).toBeLessThan(20);
    expect(cures[0]?.slip.everyS ?? Infinity).toBeGreaterThan(200);
  });
});
