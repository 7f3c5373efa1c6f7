import { describe, expect, it } from "vitest";
import { analogSystems } from "@/lib/timing/catalogue/analog-systems";
import { catalogue } from "@/lib/timing/catalogue/catalogue";
import { judgeBlanking } from "@/lib/timing/judge-blanking";
import { fitsEnvelope } from "@/lib/timing/judge-envelope";
import { fieldLines, horizontalUs, lineRateHz } from "@/lib/timing/rates";
import { rasterProblems } from "@/lib/timing/raster-problems";
import { screenPresets } from "@/lib/timing/screen-presets";
import { standardNames, standardRaster, type StandardName } from "@/lib/timing/standards";
import { publishedDmts, publishedVics, rasterOf, readStandard } from "@/tests/fixtures/standards/read";

const vics = new Map(publishedVics());
const entry = (id: string) => catalogue.find((one) => one.id === id);

describe("standard rasters", () => {
  // Source: tests/fixtures/standards/vic.json.
  it.each(standardNames.map((name) => [name] as const))("%s equals each of its CTA-861 codes", (name) => {
    const { vics: codes, timing } = standardRaster(name);
    expect(codes.length).toBeGreaterThan(0);
    for (const code of codes) {
      const published = vics.get(code);
      expect(published && rasterOf(published)).toEqual(timing);
    }
  });

  it("lists how far CTA-861 is from BT.470 at 15 kHz", () => {
    // Source: ITU-R BT.470-5 (spans in analog-systems.ts, from analog.json); CTA-861 codes 8 and 23.
    const beyond = (name: StandardName, system: string) => {
      const us = horizontalUs(standardRaster(name).timing);
      const spans = analogSystems.find((one) => one.name === system);
      if (spans === undefined) throw new Error(system);
      const blank = us.frontPorch + us.sync + us.backPorch;
      const off = (value: number, [min, max]: readonly [number, number]) =>
        Number((value - Math.min(Math.max(value, min), max)).toFixed(3));
      return {
        frontPorchUs: off(us.frontPorch, spans.frontPorchUs),
        syncUs: off(us.sync, spans.syncUs),
        lineBlankUs: off(blank, spans.lineBlankUs),
      };
    };
    expect(beyond("240p60", "525/60")).toEqual({ frontPorchUs: 0, syncUs: -0.007, lineBlankUs: -0.478 });
    expect(beyond("288p50", "625/50")).toEqual({ frontPorchUs: -0.311, syncUs: 0, lineBlankUs: -1.033 });
  });

  it("holds BT.470's figures as published", () => {
    // Source: tests/fixtures/standards/analog.json.
    const published =
      readStandard<Record<string, { lines_frame: number; field_hz: number; sync_us: string; line_blank_us: string }>>(
        "analog.json",
      );
    for (const system of analogSystems) {
      const from = published[system.name];
      const around = (text: string | undefined) => {
        const [mid, off] = (text ?? "").split("+-").map(Number);
        return [Number(((mid ?? NaN) - (off ?? NaN)).toFixed(2)), Number(((mid ?? NaN) + (off ?? NaN)).toFixed(2))];
      };
      expect(system.frameLines).toBe(from?.lines_frame);
      expect(system.fieldRateHz).toBeCloseTo(from?.field_hz ?? NaN, 3);
      expect(system.syncUs).toEqual(around(from?.sync_us));
      expect(system.lineBlankUs).toEqual(around(from?.line_blank_us));
    }
  });
});

describe("the catalogue", () => {
  it.each(publishedVics())("holds CTA-861 code %i as published", (code, published) => {
    expect(entry(`cta-861-${code}`)?.timing).toEqual(rasterOf(published));
  });

  it.each(publishedDmts())("holds VESA DMT %i as published", (code, published) => {
    expect(entry(`vesa-dmt-${code.toString(16).padStart(2, "0")}`)?.timing).toEqual(rasterOf(published));
  });

  it("has each id once, and only rasters", () => {
    expect(new Set(catalogue.map(({ id }) => id)).size).toBe(catalogue.length);
    expect(catalogue.flatMap(({ timing }) => rasterProblems(timing))).toEqual([]);
  });

  it("has the line-count variants of the 240 and 288 line formats, longer by front porch alone", () => {
    // Source: CTA-861 (262 or 263; 312, 313 or 314 lines), as Linux drm_edid.c varies the front porch.
    const totals = (code: number) =>
      catalogue
        .filter((one) => one.document === "CTA-861" && one.code === code)
        .map(({ timing }) => fieldLines(timing));
    for (const code of [8, 9, 12, 13]) expect(totals(code)).toEqual([262, 263]);
    for (const code of [23, 24, 27, 28]) expect(totals(code)).toEqual([312, 313, 314]);
    expect(entry("cta-861-23-314")?.timing.vertical).toMatchObject({
      active: 288,
      frontPorch: 4,
      sync: 3,
      backPorch: 19,
    });
  });

  it("samples the analogue systems as BT.601 does", () => {
    // Source: ITU-R BT.601, tests/fixtures/standards/analog.json: 13.5 MHz, 858 and 864 clocks, front 16 and 12.
    const at = (id: string) => {
      const timing = entry(id)?.timing;
      return (
        timing && [
          timing.pixelClockHz,
          timing.horizontal.active,
          timing.pixelClockHz / lineRateHz(timing),
          timing.horizontal.frontPorch,
        ]
      );
    };
    expect(at("bt601-525")).toEqual([13.5e6, 720, 858, 16]);
    expect(at("bt601-625")).toEqual([13.5e6, 720, 864, 12]);
  });
});

describe("blanking of standards", () => {
  it("cautions against no published raster", () => {
    const cautioned = catalogue.filter(({ timing }) =>
      judgeBlanking(timing).some(({ outcome }) => outcome !== "inside"),
    );
    expect(cautioned.map(({ id }) => id)).toEqual([]);
  });
});

describe("screen presets", () => {
  it("equal the published envelopes", () => {
    // Source: tests/fixtures/standards/screens.json.
    const published = readStandard<{ screens: Record<string, unknown> }>("screens.json").screens;
    const ours = Object.fromEntries(
      screenPresets.map(({ id, envelope }) => [
        id,
        Object.fromEntries(Object.entries(envelope).filter(([key]) => key !== "sources")),
      ]),
    );
    expect(ours).toEqual(published);
  });

  it("say where each of their limits comes from", () => {
    for (const { envelope, basis } of screenPresets) {
      const limits = Object.keys(envelope).filter((key) => key !== "name" && key !== "sources");
      expect(Object.keys(basis).sort()).toEqual(limits.sort());
      expect(Object.keys(envelope.sources ?? {}).sort()).toEqual(limits.sort());
    }
  });

  it("take the standards that they are named after and no other rate", () => {
    const takes = (id: string) => {
      const screen = screenPresets.find((preset) => preset.id === id)?.envelope;
      return standardNames.filter((name) => screen !== undefined && fitsEnvelope(standardRaster(name).timing, screen));
    };
    expect(takes("bt470-525")).toEqual(["240p60", "480i60"]);
    expect(takes("bt470-625")).toEqual(["288p50", "576i50"]);
    expect(takes("bt470-both")).toEqual(["240p60", "288p50", "480i60", "576i50"]);
    expect(takes("vic1-31k")).toEqual(["480p60", "480p60-640"]);
  });
});
