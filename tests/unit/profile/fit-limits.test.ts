import { describe, expect, it } from "vitest";
import { checkProfile } from "@/lib/profile/check/check-profile";
import { fitLimits } from "@/lib/profile/fit-limits";
import { fitOnDevice } from "@/lib/profile/fit-on-device";
import type { DeviceLimits } from "@/lib/profile/limits";
import { roundTiming } from "@/lib/profile/round";
import { shippedDrivers } from "@/lib/serial/drivers/shipped";
import { deviceLimits } from "@/lib/serial/limits";
import { sameRaster } from "@/lib/timing/same-raster";
import { screenPresets } from "@/lib/timing/screen-presets";
import { lf8, oneSlot } from "@/tests/unit/profile/samples";

const devices = shippedDrivers.map((driver) => deviceLimits(driver));
const wishes = [
  { activeLines: 240, activePx: 1440, fieldRateHz: 60, interlaced: false },
  { activeLines: 288, activePx: 720, fieldRateHz: 50, interlaced: false },
  { activeLines: 480, activePx: 720, fieldRateHz: 60, interlaced: true },
  { activeLines: 480, activePx: 640, fieldRateHz: 60, interlaced: false },
];

/** The limits of the LF-8 with some numbers of its own. */
function withNumbers(numbers: DeviceLimits["numbers"], more: Partial<DeviceLimits> = {}): DeviceLimits {
  return { ...lf8, ...more, numbers: { ...lf8.numbers, ...numbers } };
}

describe("a device's limits for the fitting engine", () => {
  it.each(devices)("give rasters that $name holds as they are and that no check stops", (device) => {
    let fitted = 0;
    for (const { envelope } of screenPresets) {
      for (const wish of wishes) {
        const result = fitOnDevice({ wish, screen: envelope, device });
        if (!result.ok) throw new Error(JSON.stringify(result.error));
        for (const { timing } of [...result.value.fits, ...result.value.nearest]) {
          fitted += 1;
          // A clock that follows its source is not on the device's steps: the source sets it.
          const held = roundTiming(timing, device);
          if (device.outputClock === "free") expect(sameRaster(held, timing)).toBe(true);
          else expect({ ...held, pixelClockHz: 0 }).toEqual({ ...timing, pixelClockHz: 0 });
          const stops = checkProfile({ document: oneSlot({}, timing), device, screen: envelope }).filter(
            ({ severity }) => severity === "stop",
          );
          expect(stops).toEqual([]);
        }
      }
    }
    expect(fitted).toBeGreaterThan(40);
  });

  it("take the clock's own range and steps, and none where the driver has no word for it", () => {
    expect(fitLimits(lf8)).toMatchObject({
      clockHz: { min: 5e6, max: 165e6, step: 50_000 },
      maxLineTotal: 4095,
      maxFieldLines: 1500,
      interlace: true,
      outputClock: "free",
    });
    const { "modes[*].timing.pixelClockHz": _clock, ...numbers } = lf8.numbers;
    expect(fitLimits({ ...lf8, numbers, clockHz: { min: 0, max: 0, step: 1 } }).clockHz).toBeUndefined();
  });

  it("count across in the least common multiple of what the device and its parts step by", () => {
    const part = (step: number) => ({ min: step, max: 1023, step });
    const limits = fitLimits(
      withNumbers(
        { "modes[*].timing.horizontal.active": part(4), "modes[*].timing.horizontal.sync": part(6) },
        { horizontalMultiple: 2 },
      ),
    );
    expect(limits.horizontalMultiple).toBe(12);
    // 1023 is no step of 4: the last one is 1020.
    expect(limits.horizontal?.active).toEqual([4, 1020]);
    // Steps that begin at 1 are no multiples; rounding afterwards is what holds them.
    const odd = withNumbers({ "modes[*].timing.horizontal.sync": { min: 1, max: 101, step: 4 } });
    expect(fitLimits(odd)).toMatchObject({ horizontalMultiple: 1, horizontal: { sync: [1, 101] } });
  });

  it("say so where the device rounds whatever fits to something that does not", () => {
    const device = withNumbers({ "modes[*].timing.vertical.backPorch": { min: 100, max: 255, step: 100 } });
    const [wish] = wishes;
    const [preset] = screenPresets;
    if (wish === undefined || preset === undefined) throw new Error("nothing to ask for");
    const result = fitOnDevice({ wish, screen: preset.envelope, device });
    if (!result.ok) throw new Error(JSON.stringify(result.error));
    expect(result.value.fits).toEqual([]);
    expect(result.value.blockedBy.map(({ rule }) => rule)).toEqual(["device.range"]);
    const coarse = withNumbers({ "modes[*].timing.vertical.sync": { min: 1, max: 61, step: 60 } });
    const none = fitOnDevice({ wish, screen: preset.envelope, device: coarse });
    expect(none).toMatchObject({ value: { fits: [], blockedBy: [{ rule: "device.step", severity: "stop" }] } });
  });

  it("bar interlace where the device puts none out", () => {
    expect(fitLimits({ ...lf8, interlace: false }).interlace).toBe(false);
  });
});
