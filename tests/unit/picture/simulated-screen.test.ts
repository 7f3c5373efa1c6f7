import { describe, expect, it } from "vitest";
import { paintScreen } from "@/lib/picture/paint-screen";
import { BLACK, inkAt, inks, patterns } from "@/lib/picture/patterns";
import { simulateScreen, type ScreenInput, type SimulatedScreen } from "@/lib/picture/simulated-screen";
import { screenPresets } from "@/lib/timing/screen-presets";
import { standardRaster } from "@/lib/timing/standards";

const television = screenPresets.find(({ id }) => id === "bt470-525")?.envelope;
const source = { activePx: 720, activeLines: 480, interlaced: false, fieldRateHz: 60 };
const mode = standardRaster("240p60").timing;
const simulate = (input: Partial<ScreenInput>) =>
  simulateScreen({ source, trim: {}, mode, placement: {}, screen: television, pattern: "bars", ...input });

/** First and last lit column of a row. */
function extent(screen: SimulatedScreen, row: number): [number, number] {
  const runs = screen.rows[row]?.runs ?? [];
  const last = runs.at(-1);
  return [runs[0]?.leftPx ?? -1, last ? last.leftPx + last.widthPx : -1];
}

describe("simulateScreen, in lock", () => {
  it("shows one row for each line of the raster, in the screen's own shape", () => {
    const screen = simulate({});
    expect(screen).toMatchObject({ locked: true, why: [], widthPx: 640, heightPx: 480 });
    expect(screen.rows).toHaveLength(240);
    expect(simulate({ screen: { name: "upright", bands: [], aspect: "3:4" } })).toMatchObject({
      widthPx: 480,
      heightPx: 640,
    });
  });

  it("puts the picture where placement puts it in the active raster", () => {
    // 90 % of 1 440 px, 72 px to the right: from 144 to 1 440, which is 64 to 640 of 640. The last bar is black.
    const [from, to] = extent(simulate({ placement: { widthPct: 90, offsetPx: 72 } }), 120);
    expect(from).toBe(64);
    expect(to).toBe(64 + (576 * 7) / 8);
    const tall = simulate({ placement: { heightPct: 50 } });
    expect(tall.rows.findIndex(({ runs }) => runs.length > 0)).toBe(60);
    expect(tall.rows.filter(({ runs }) => runs.length > 0)).toHaveLength(120);
  });

  it("cuts what trim cuts: half of the bars, twice as wide", () => {
    const whole = simulate({}).rows[100]?.runs ?? [];
    const half = simulate({ trim: { rightPx: 360 } }).rows[100]?.runs ?? [];
    expect(half.map(({ widthPx }) => widthPx)).toEqual(whole.slice(0, 4).map(({ widthPx }) => widthPx * 2));
  });

  it("shades what the frame hides, as far as the screen says", () => {
    const visible = { left: 5, right: 5, top: 2.5, bottom: 0 };
    expect(simulate({ screen: { ...requireScreen(), visiblePct: visible } }).hidden).toEqual([
      { leftPx: 0, topPx: 0, widthPx: 640, heightPx: 12 },
      { leftPx: 0, topPx: 12, widthPx: 32, heightPx: 468 },
      { leftPx: 608, topPx: 12, widthPx: 32, heightPx: 468 },
    ]);
    expect(simulate({}).hidden).toEqual([]);
  });

  it("stops where nothing of the picture is left", () => {
    expect(simulate({ placement: { offsetPx: 2000 } })).toMatchObject({
      locked: true,
      why: ["nothing-inside"],
      rows: [],
    });
  });
});

function requireScreen() {
  if (!television) throw new Error("no preset");
  return television;
}

describe("simulateScreen, out of lock", () => {
  it("says why: rates, interlace, sync", () => {
    const why = (input: Partial<ScreenInput>) => simulate(input).why;
    expect(why({ mode: standardRaster("480p60").timing })).toEqual(["line-rate", "sync"]);
    expect(why({ mode: standardRaster("288p50").timing })).toEqual(["field-rate"]);
    expect(why({ mode: standardRaster("480i60").timing, screen: { ...requireScreen(), interlace: false } })).toEqual([
      "interlace",
    ]);
    expect(why({ syncKind: "separate" })).toEqual(["sync-kind"]);
    expect(why({ mode: null })).toEqual(["no-raster"]);
    expect(why({ mode: { ...mode, vertical: { ...mode.vertical, sync: 0 } } })).toEqual(["no-sync"]);
  });

  it("tears its lines by the difference of the line rates: each starts that much later in the signal's line", () => {
    const fast = { ...mode, pixelClockHz: mode.pixelClockHz * 1.02 };
    const own = 15_892; // the top of the screen's band
    const drift = (fast.pixelClockHz / 1716 / own - 1) * 1716; // px a line
    const torn = simulate({ mode: fast, pattern: "bars" });
    expect(torn.locked).toBe(false);
    const px = (row: number) => (extent(torn, row)[0] / 640) * 1440;
    // Between two rows the left edge of the picture moves by the drift of the rows between them.
    const rows = torn.rows.map((_, row) => row).filter((row) => extent(torn, row)[0] > 0);
    const [from = 0] = rows;
    const to = from + 3;
    expect(Math.abs(Math.abs(px(to) - px(from)) - 3 * drift)).toBeLessThan(6);
  });

  it("rolls where the field rate alone is off: no line is shifted, and the field blanking is seen", () => {
    const rolled = simulate({ mode: standardRaster("288p50").timing });
    const lit = rolled.rows.map((_, row) => extent(rolled, row)).filter(([from]) => from >= 0);
    expect(new Set(lit.map(String)).size).toBe(1);
    const dark = rolled.rows.map(({ runs }) => runs.length === 0);
    expect(dark.indexOf(true)).toBeGreaterThan(0);
    expect(dark.lastIndexOf(true)).toBeLessThan(rolled.rows.length - 1);
  });

  it("draws no more rows than the picture has, whatever the raster", () => {
    const huge = { ...mode, pixelClockHz: 20e9, vertical: { ...mode.vertical, active: 65_000 } };
    expect(simulate({ mode: huge }).rows.length).toBeLessThanOrEqual(480);
    expect(simulate({ mode: huge, screen: undefined, longSidePx: 1e9 })).toMatchObject({
      widthPx: 2048,
      heightPx: 1536,
    });
  });
});

describe("patterns", () => {
  const frame = { widthPx: 720, heightLines: 480, aspect: 4 / 3 };

  it("are black outside the source, and only in inks that there are", () => {
    for (const pattern of patterns) {
      expect(inkAt(pattern, -1, 10, frame)).toBe(BLACK);
      expect(inkAt(pattern, 10, 480, frame)).toBe(BLACK);
      for (let px = 0; px < 720; px += 7)
        for (let line = 0; line < 480; line += 5) expect(inks[inkAt(pattern, px, line, frame)]).toBeDefined();
    }
  });

  it("draw a circle that is round in the picture's own shape", () => {
    const rim = (dx: number, dy: number) => inkAt("circle", 360 + (dx / (4 / 3)) * 720, 240 + dy * 480, frame);
    for (let degree = 0; degree < 360; degree += 15) {
      const [x, y] = [Math.cos((degree * Math.PI) / 180) * 0.42, Math.sin((degree * Math.PI) / 180) * 0.42];
      expect(rim(x, y)).toBe(1);
    }
  });

  it("have bars of 75 %: 191 of 255, in the order of falling brightness (common practice, no source)", () => {
    const bars = Array.from({ length: 8 }, (_, bar) => inks[inkAt("bars", bar * 90 + 45, 100, frame)]);
    expect(bars).toEqual(["#bfbfbf", "#bfbf00", "#00bfbf", "#00bf00", "#bf00bf", "#bf0000", "#0000bf", "#000000"]);
    const luma = (ink = "") =>
      [1, 3, 5]
        .map((at) => parseInt(ink.slice(at, at + 2), 16))
        .reduce((sum, level, index) => sum + level * ([0.299, 0.587, 0.114][index] ?? 0), 0);
    expect(bars.map(luma)).toEqual(bars.map(luma).sort((a, b) => b - a)); // luma weights: ITU-R BT.601
  });
});

describe("paintScreen", () => {
  it("paints ground, rows and hidden edges, each inside the canvas", () => {
    const calls: { style: string; rect: number[] }[] = [];
    const context = {
      fillStyle: "" as string | CanvasGradient | CanvasPattern,
      fillRect(...rect: number[]) {
        calls.push({ style: String(this.fillStyle), rect });
      },
    };
    const screen = simulate({ screen: { ...requireScreen(), visiblePct: { left: 5, right: 5, top: 5, bottom: 5 } } });
    paintScreen(context, screen);
    expect(calls[0]).toEqual({ style: "#000000", rect: [0, 0, 640, 480] });
    expect(calls.slice(-4).every(({ style }) => style.startsWith("rgba"))).toBe(true);
    expect(calls).toHaveLength(1 + screen.rows.flatMap(({ runs }) => runs).length + 4);
    expect(
      calls.every(
        ({ rect: [x = 0, y = 0, width = 0, height = 0] }) => x >= 0 && y >= 0 && x + width <= 640 && y + height <= 480,
      ),
    ).toBe(true);
  });
});
