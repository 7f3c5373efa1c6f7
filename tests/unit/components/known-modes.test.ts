import { describe, expect, it } from "vitest";
import { knownModes } from "@/components/screens/known-modes";
import { frameLines, lineRateHz } from "@/lib/timing/rates";

describe("modes that a screen is held against", () => {
  // CTA-861: 240 lines in 262 or 263, 288 lines in 312, 313 or 314; 525 and 625 interlaced.
  it("holds every line count of the 15 kHz formats once", () => {
    const low = knownModes.filter(({ timing }) => lineRateHz(timing) < 17_000);
    const counts = low.map(({ timing }) => frameLines(timing)).sort((a, b) => a - b);
    expect(counts).toEqual([262, 263, 312, 313, 314, 525, 625]);
  });

  it("names each by itself", () => {
    expect(new Set(knownModes.map(({ name }) => name)).size).toBe(knownModes.length);
    expect(knownModes.map(({ name }) => name)).toEqual(
      expect.arrayContaining(["240p60", "288p50, 313 lines", "480p60"]),
    );
  });
});
