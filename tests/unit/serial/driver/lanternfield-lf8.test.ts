import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { MAX_SETTINGS, driverDefinitionSchema } from "@/lib/serial/driver/definition";
import { nativeProblem } from "@/lib/serial/driver/compile";
import { commitCost, recallCost, wholeReadCost, wireLimitMs, writeCost } from "@/lib/serial/driver/costs";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { shippedDriver, findShippedDriver } from "@/lib/serial/drivers/shipped";
import { rasterOfMode } from "@/lib/serial/plan/output-raster";
import { deviceLimits } from "@/lib/serial/limits";
import { lf8 } from "@/tests/unit/serial/simulated-rig";

type Published = { [field: string]: number | boolean | string };
const values = new Map(lf8.settings.map((setting) => [setting.key, setting.initial]));

describe("the LF-8 driver", () => {
  it("is data: it survives JSON and its own schema", () => {
    expect(driverDefinitionSchema.parse(JSON.parse(JSON.stringify(lanternfieldLf8)))).toEqual(lanternfieldLf8);
    expect(shippedDriver("lanternfield-lf8")).toBe(lanternfieldLf8);
    expect(findShippedDriver("nobody")).toBeUndefined();
    expect(() => shippedDriver("nobody")).toThrow("nobody");
  });

  it("counts slots and modes out within the bound, each initial value one that the device holds", () => {
    expect(lf8.settings).toHaveLength(7 + 8 * 14 + 32 * 13);
    expect(lf8.settings.length).toBeLessThanOrEqual(MAX_SETTINGS);
    for (const { key, value, initial } of lf8.settings) expect(`${key}: ${nativeProblem(value, initial)}`).toBe(`${key}: null`);
  });

  // Source: the range rulers of the bench drawing and the rounding note of the plan drawing (0.4 %).
  it("has the ranges that the drawings show", () => {
    const { numbers, choices, texts, syncOutputs } = deviceLimits(lanternfieldLf8, "3.2");
    expect(numbers["slots[*].placement.offsetPx"]).toMatchObject({ min: -64, max: 63, step: 1, unit: "px" });
    expect(numbers["slots[*].placement.offsetLines"]).toMatchObject({ min: -20, max: 20, step: 1, unit: "lines" });
    expect(numbers["slots[*].placement.widthPct"]).toMatchObject({ min: 80, max: 120, step: 0.4, unit: "%" });
    expect(numbers["modes[*].timing.pixelClockHz"]).toMatchObject({ min: 5_000_000, max: 165_000_000, step: 50_000, unit: "Hz" });
    expect(choices["slots[*].syncKind"]).toEqual(["composite", "separate", "onGreen", "onLuma"]);
    expect(choices["modes[*].timing.interlaced"]).toBeUndefined();
    expect(texts["slots[*].name"]?.maxLength).toBe(16);
    expect(syncOutputs.find(({ kind }) => kind === "composite")?.vpp).toBe(2.1);
  });

  it("names no native setting to the checks", () => {
    const limits = deviceLimits(lanternfieldLf8);
    expect([...Object.keys(limits.numbers), ...Object.keys(limits.choices), ...Object.keys(limits.texts)].filter((key) => key.includes("native"))).toEqual([]);
    expect(limits.firmware).toEqual({ min: "3.0", max: "3.4", running: undefined });
  });

  // Source: CTA-861 as in tests/fixtures/standards/vic.json. VIC 1 has 25.175 MHz or, at 60 Hz, 25.2: the device's step takes the latter.
  it.each([[1, 8, 27_000], [2, 6, 27_000], [3, 23, 27_000], [4, 21, 27_000], [5, 2, 27_000], [6, 17, 27_000], [7, 1, 25_200], [8, 4, 74_250]])(
    "comes with CTA-861's figures in mode %i (VIC %i)",
    (mode, vic, clockKHz) => {
      const { vics } = JSON.parse(readFileSync("tests/fixtures/standards/vic.json", "utf8")) as { vics: Record<string, Published> };
      const row = vics[String(vic)] ?? {};
      const polarity = (letter: unknown) => (letter === "P" ? "positive" : "negative");
      expect(rasterOfMode(lf8, values, mode)).toEqual({
        pixelClockHz: clockKHz * 1000, interlaced: row["interlaced"],
        horizontal: { active: row["hactive"], frontPorch: row["hfp"], sync: row["hsync"], backPorch: row["hbp"], polarity: polarity(row["hpol"]) },
        vertical: { active: Number(row["vactive"]) / (row["interlaced"] ? 2 : 1), frontPorch: row["vfp"], sync: row["vsync"], backPorch: row["vbp"], polarity: polarity(row["vpol"]) },
      });
    },
  );

  // By hand: 10 bits a character at 115 200 baud; SLOT4:HPOS 12*713F and its line end are 19 characters, the reply 19, the read 17 and 19.
  it("costs what its characters and its work cost", () => {
    const cost = writeCost(lf8, [{ key: "slots[4].placement.offsetPx", value: 12 }]);
    expect(cost.bytes).toBe(19 + 19 + 17 + 19);
    expect(cost.seconds * 1000).toBeCloseTo((74 * 10_000) / 115_200 + 2 * 2, 6);
    expect(commitCost(lf8).seconds * 1000).toBeGreaterThan(180);
    expect(recallCost(lf8, 2, null).bytes).toBeGreaterThan(0);
    expect(wholeReadCost(lf8).seconds * 1000).toBeGreaterThan(wireLimitMs(lf8));
  });

  // By hand: 535 settings at 2 ms of work, the shortest request and reply around them, is the bottleneck with four in flight.
  it("has a wire limit set by the device's work", () => {
    expect(wireLimitMs(lf8)).toBeGreaterThan(535 * 2);
    expect(wireLimitMs(lf8)).toBeLessThan(535 * 2 + 4);
  });
});
