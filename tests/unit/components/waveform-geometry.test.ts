import { describe, expect, it } from "vitest";
import { fieldWaveform, GLYPH, lineWaveform, modeGlyph, waveformPath } from "@/components/video/waveform-geometry";
import { standardNames, standardRaster } from "@/lib/timing/standards";

const timing = (name: (typeof standardNames)[number]) => standardRaster(name).timing;
const shape = { widthPx: 900, blankingShare: 0.36 };

describe("line waveform", () => {
  it.each(standardNames)("draws the parts of %s end to end over the whole width", (name) => {
    const { parts } = lineWaveform(timing(name), shape);
    expect(parts[0]?.fromPx).toBe(0);
    parts.slice(1).forEach((part, index) => expect(part.fromPx).toBeCloseTo(parts[index]?.toPx ?? Number.NaN, 9));
    expect(parts.at(-1)?.toPx).toBeCloseTo(900, 6);
  });

  // CTA-861 code 8: 38, 124, 114 and 1 440 clocks of 27 MHz.
  it("states the µs of 240 lines at 60 Hz", () => {
    const { parts } = lineWaveform(timing("240p60"), shape);
    expect(parts.map((part) => [part.part, part.length.toFixed(3), part.count])).toEqual([
      ["frontPorch", "1.407", 38],
      ["sync", "4.593", 124],
      ["backPorch", "4.222", 114],
      ["active", "53.333", 1440],
    ]);
  });

  it("enlarges blanking by the factor that it states, and keeps it to scale within itself", () => {
    const { parts, blankingFactor } = lineWaveform(timing("240p60"), shape);
    const perUs = parts.map((part) => (part.toPx - part.fromPx) / part.length);
    expect((perUs[0] ?? 0) / (perUs[3] ?? 1)).toBeCloseTo(blankingFactor, 9);
    expect(perUs[0]).toBeCloseTo(perUs[1] ?? 0, 9);
    expect(perUs[1]).toBeCloseTo(perUs[2] ?? 0, 9);
    expect(blankingFactor).toBeGreaterThan(1);
  });

  it("draws blanking true where it is wide by itself", () => {
    expect(lineWaveform(timing("240p60"), { widthPx: 900, blankingShare: 0.05 }).blankingFactor).toBeCloseTo(1, 9);
  });

  it("draws sync below black and the picture above it", () => {
    const { parts } = lineWaveform(timing("240p60"), shape);
    const path = waveformPath(parts, { syncPx: 72, blackPx: 48, whitePx: 10 }, 900);
    expect(path.match(/V\d+/gu)).toEqual(["V48", "V72", "V48", "V10", "V48"]);
  });
});

describe("field waveform", () => {
  // CTA-861 code 23: 288 of 312 lines, 3 of sync.
  it("counts the lines of one field", () => {
    const { parts } = fieldWaveform(timing("288p50"), shape);
    expect(parts.reduce((sum, part) => sum + part.count, 0)).toBe(312);
    expect(parts.find((part) => part.part === "sync")?.count).toBe(3);
  });
});

describe("mode glyph", () => {
  it("has two interleaved rows for an interlaced mode and one for a progressive one", () => {
    expect(modeGlyph(timing("480i60")).fieldRows).toHaveLength(2);
    expect(modeGlyph(timing("240p60")).fieldRows).toHaveLength(1);
  });

  it("is longer for more lines, by one scale", () => {
    const length = (name: (typeof standardNames)[number]) => {
      const row = modeGlyph(timing(name)).fieldRows[0];
      return (row?.toPx ?? 0) - (row?.fromPx ?? 0);
    };
    // 262 and 312 lines: CTA-861 codes 8 and 23.
    expect(length("288p50") / length("240p60")).toBeCloseTo(312 / 262, 2);
  });

  it("says so where a field has more lines than it can show", () => {
    const tall = { ...timing("480p60"), vertical: { ...timing("480p60").vertical, active: 1080 } };
    expect(modeGlyph(tall).isCutShort).toBe(true);
    expect(modeGlyph(tall).fieldRows[0]?.toPx).toBe(GLYPH.fieldToPx);
    expect(modeGlyph(timing("480p60")).isCutShort).toBe(false);
  });

  it("leaves room for the picture however long blanking is", () => {
    const base = timing("240p60");
    const long = { ...base, horizontal: { ...base.horizontal, backPorch: 4000 } };
    const turns = [...modeGlyph(long).linePath.matchAll(/H([\d.]+)/gu)].map((match) => Number(match[1]));
    expect(turns.at(-2)).toBeLessThanOrEqual(GLYPH.lineWidthPx - 8 + 0.01);
  });
});
