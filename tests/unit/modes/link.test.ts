import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { deviceBySlug, fromQuery, sourceFromText, sourceToText, toQuery } from "@/components/modes/store/link";
import { DEFAULT_CHOICES, type ModesChoices } from "@/components/modes/store/choices";
import { rasterFromText, rasterToText } from "@/lib/timing/raster-text";
import { rasterProblems } from "@/lib/timing/raster-problems";
import { standardNames, standardRaster } from "@/lib/timing/standards";
import { choicesOnLf8 } from "@/tests/unit/modes/samples";

const read = (text: string) => fromQuery(Object.fromEntries(new URLSearchParams(text)));

const full: ModesChoices = choicesOnLf8({
  wish: { activeLines: 480, activePx: 1440, fieldRateHz: 59.94, interlaced: true },
  stated: { pixelClockHz: 27_050_000, lineRateHz: 15_734.266, lineTotal: 1716, fieldLines: 262 },
  keep: ["fieldRateHz", "interlaced", "horizontal.sync", "vertical.backPorch"],
  raster: standardRaster("480i60").timing,
  byHand: true,
  screen: {
    id: "6f0f3a52-6f4e-4d0e-9f3b-0c6c1a4b7a11",
    envelope: {
      name: "Gallery 2, wide CRT",
      bands: [{ lineRateHz: [15_450, 15_892], fieldRateHz: [48, 62] }],
      minSyncUs: 4,
    },
  },
  source: { activePx: 720, activeLines: 480, interlaced: true, fieldRateHz: 59.94 },
});

describe("a link", () => {
  it("holds everything that was chosen", () => {
    expect(read(toQuery(full))).toEqual({ choices: full, problems: [] });
    expect(read(toQuery(DEFAULT_CHOICES))).toEqual({ choices: DEFAULT_CHOICES, problems: [] });
    const nothing = { ...DEFAULT_CHOICES, source: null };
    expect(read(toQuery(nothing))).toEqual({ choices: nothing, problems: [] });
  });

  it("is written in words and figures that can be read", () => {
    expect(toQuery(choicesOnLf8({ stated: { pixelClockHz: 27e6 }, keep: ["fieldRateHz"] }))).toBe(
      "lines=240&rate=60&width=1440&scan=progressive&clock=27&keep=rate&screen=bt470-525&source=1920x1080p60&device=lanternfield-lf8",
    );
  });

  it("that is empty begins where the page begins", () => {
    expect(fromQuery({})).toEqual({ choices: DEFAULT_CHOICES, problems: [] });
  });

  it.each([
    ["lines=many", "lines"],
    ["rate=-60", "rate"],
    ["scan=zigzag", "scan"],
    ["clock=NaN", "clock"],
    ["keep=everything", "keep"],
    ["raster=27_1_2", "raster"],
    ["source=film", "source"],
    ["device=none-such", "device"],
    ["screen=none-such", "screen"],
    ["screen=own&limits=%7B", "limits"],
  ])("with a bad value (%s) falls back, and says so", (query, word) => {
    const { choices, problems } = read(query);
    expect(choices).toEqual(DEFAULT_CHOICES);
    expect(problems[0]).toContain(word);
  });

  it("whose figures no raster has falls back whole, and says so", () => {
    const { choices, problems } = read("lines=2&rate=60");
    expect(choices.wish).toEqual(DEFAULT_CHOICES.wish);
    expect(problems.join(" ")).toContain("activeLines");
  });

  it("waits for an owner's screen that it only names", () => {
    const id = "6f0f3a52-6f4e-4d0e-9f3b-0c6c1a4b7a11";
    expect(read(`screen=${id}`).choices.screen).toEqual({ id, envelope: null });
  });

  it("never throws, whatever is in it", () => {
    const keys = [
      "lines",
      "rate",
      "width",
      "scan",
      "clock",
      "linerate",
      "linetotal",
      "fieldlines",
      "keep",
      "screen",
      "limits",
      "source",
      "device",
      "raster",
      "made",
    ];
    fc.assert(
      fc.property(fc.dictionary(fc.constantFrom(...keys), fc.string({ maxLength: 120 })), (query) => {
        const { choices } = fromQuery(query);
        expect(choices.wish.activeLines).toBeGreaterThan(0);
      }),
      { numRuns: 300 },
    );
  });
});

describe("a raster as a word of an address", () => {
  it("is read back to the same raster", () => {
    for (const name of standardNames) {
      const { timing } = standardRaster(name);
      expect(rasterFromText(rasterToText(timing))).toEqual(timing);
    }
    expect(rasterToText(standardRaster("240p60").timing)).toBe("27_1440.38.124.114_240.4.3.15_pnn");
  });

  it("is nothing where it is no raster, or too long", () => {
    fc.assert(
      fc.property(fc.string({ maxLength: 130 }), (text) => {
        const timing = rasterFromText(text);
        if (timing !== undefined) expect(rasterProblems(timing)).toEqual([]);
      }),
    );
    expect(rasterFromText(`27_1440.38.124.114_240.4.3.15_pnn${" ".repeat(100)}`)).toBeUndefined();
    expect(rasterFromText("0_1440.38.124.114_240.4.3.15_pnn")).toBeUndefined();
  });
});

it("a source format is read back as it was written", () => {
  const format = { activePx: 1920, activeLines: 1080, interlaced: true, fieldRateHz: 59.94 };
  expect(sourceFromText(sourceToText(format))).toEqual(format);
  expect(sourceFromText("0x1080p60")).toBeUndefined();
});

it("a device of a link is one of the shipped drivers", () => {
  expect(deviceBySlug("brackenrow-4r")?.limits.name).toBe("Brackenrow 4R");
  expect(deviceBySlug("none-such")).toBeUndefined();
});
