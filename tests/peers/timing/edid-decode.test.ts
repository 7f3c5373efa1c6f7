import { describe, expect, it } from "vitest";
import { catalogue } from "@/lib/timing/catalogue/catalogue";
import { detailedTiming } from "@/lib/timing/edid/detailed-timing";
import { parseEdid } from "@/lib/timing/edid/parse-edid";
import { formatModeline } from "@/lib/timing/modeline/format-modeline";
import { parseModeline } from "@/lib/timing/modeline/parse-modeline";
import type { RasterTiming } from "@/lib/timing/raster";
import { activeFrameLines, fieldRateHz, lineRateHz } from "@/lib/timing/rates";
import { publishedDmts, publishedEdids, publishedVics, rasterOf } from "@/tests/fixtures/standards/read";
import { buildEdid, detailedDescriptor, fitsDescriptor } from "@/tests/peers/timing/build-edid";
import { runOnFile, runPeer } from "@/tests/peers/timing/run-peer";

/** Detailed timings carry the clock in 10 kHz: 25.175 MHz goes in as 25.18. The tables below compare exact clocks. */
const published = [...publishedVics(), ...publishedDmts()]
  .map(([, timing]) => rasterOf(timing))
  .map((timing) => ({ ...timing, pixelClockHz: Math.round(timing.pixelClockHz / 10_000) * 10_000 }));

/** The nine figures and the flags of a modeline, without its name. */
function figuresOf(line: string): (number | string)[] {
  const words = line
    .replace(/^\s*Modeline\s+"[^"]*"/u, "")
    .trim()
    .split(/\s+/u);
  return words.map((word) => (/^[\d.]+$/u.test(word) ? Number(word) : word.toLowerCase()));
}

/**
 * What this version prints for an interlaced raster: the frame's picture lines with one field's porches behind them.
 * X.Org counts both fields throughout, so no X server takes such a line; its parts are right all the same.
 */
function asPrinted(timing: RasterTiming): (number | string)[] {
  const figures = figuresOf(formatModeline(timing));
  if (!timing.interlaced) return figures;
  const { frontPorch, sync, backPorch } = timing.vertical;
  const start = activeFrameLines(timing) + frontPorch;
  return [...figures.slice(0, 6), start, start + sync, start + sync + backPorch + 1, ...figures.slice(9)];
}

describe("edid-decode, given every published raster in one EDID", () => {
  it("prints our modelines, and we read its own back to the same raster", async () => {
    const { bytes, order } = buildEdid(published);
    const output = await runOnFile("edid-decode", ["-s", "-X", "@"], bytes);
    const lines = output.split("\n").filter((line) => line.includes("Modeline"));
    expect(lines).toHaveLength(order.length);
    order.forEach((timing, index) => {
      const line = lines[index] ?? "";
      expect(figuresOf(line)).toEqual(asPrinted(timing));
      if (timing.interlaced) return;
      const parsed = parseModeline(line.trim());
      expect(parsed.ok && parsed.value.timing).toEqual(timing);
    });
  });

  it("reads the descriptors that we read", () => {
    for (const timing of published.filter(fitsDescriptor)) {
      const read = detailedTiming(Uint8Array.from(detailedDescriptor(timing)));
      expect(read).toEqual(timing);
    }
  });
});

describe("edid-decode, asked for its own tables", () => {
  /** `VIC   6:  1440x480i   59.940060 Hz   4:3     15.734 kHz     27.000000 MHz` */
  const row = /(?:VIC|DMT)\s+(\S+):\s+(\d+)x(\d+)(i?)\s+([\d.]+) Hz\s+\S+\s+([\d.]+) kHz\s+([\d.]+) MHz/u;

  it.each([
    ["--list-vics", "CTA-861", 150],
    ["--list-dmts", "VESA DMT", 80],
  ] as const)("%s has the rasters and rates of our %s", async (option, document, least) => {
    const matches = (await runPeer("edid-decode", [option])).split("\n").flatMap((line) => {
      const match = row.exec(line);
      return match === null ? [] : [match.slice(1)];
    });
    expect(matches.length).toBeGreaterThan(least);
    for (const [code = "", px, lines, interlaced, field, line, clock] of matches) {
      const entry = catalogue.find((one) => one.document === document && one.code === Number(code));
      if (entry === undefined) throw new Error(`${document} ${code} is missing`);
      const { timing } = entry;
      expect([timing.horizontal.active, activeFrameLines(timing), timing.interlaced]).toEqual([
        Number(px),
        Number(lines),
        interlaced === "i",
      ]);
      expect(timing.pixelClockHz).toBe(Math.round(Number(clock) * 1e6));
      expect(Math.abs(fieldRateHz(timing) - Number(field))).toBeLessThan(1e-6);
      expect(Math.abs(lineRateHz(timing) / 1000 - Number(line))).toBeLessThan(6e-4);
    }
  });
});

describe("edid-decode, given EDIDs of the wild", () => {
  it.each(publishedEdids())("prints the limits of %s that we read", async (_file, bytes) => {
    const output = await runOnFile("edid-decode", ["-s", "@"], bytes);
    const match = /Monitor ranges[^:]*: (\d+)-(\d+) Hz V, (\d+)-(\d+) kHz H(?:, max dotclock (\d+) MHz)?/u.exec(output);
    const [slow, fast, low, high, clock] = (match ?? []).slice(1).map(Number);
    const parsed = parseEdid(bytes);
    expect(parsed.ok && parsed.value.ranges).toMatchObject({
      fieldRateHz: [slow, fast],
      lineRateHz: [(low ?? NaN) * 1000, (high ?? NaN) * 1000],
      maxPixelClockHz: (clock ?? NaN) * 1e6,
    });
  });
});
