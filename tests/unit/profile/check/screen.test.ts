import { describe, expect, it } from "vitest";
import { isRasterAllowed } from "@/lib/profile/check/allowed-raster";
import { checkProfile } from "@/lib/profile/check/check-profile";
import { ctaCatalogue } from "@/lib/timing/catalogue/catalogue";
import { screenPresets } from "@/lib/timing/screen-presets";
import { standardNames, standardRaster } from "@/lib/timing/standards";
import { documentOf, lf8, monitor, oneSlot, television, timingOf } from "@/tests/unit/profile/samples";
import { found, labels, theOne } from "./find";

const twoModes = documentOf({
  modes: [
    { key: "high", timing: timingOf("480p60") },
    { key: "low", timing: timingOf("240p60") },
  ],
  slots: [
    { number: 1, mode: "high" },
    { number: 2, mode: "high" },
  ],
});

describe("screen", () => {
  it("refuses a raster above the screen's band, with the nearest that fits, and offers a mode that does", () => {
    const finding = theOne("screen.line-rate", { document: twoModes, screen: television });
    expect(finding).toMatchObject({
      severity: "stop",
      path: "modes[high].timing",
      unit: "Hz",
      limit: [15_577, 15_892],
      slots: [1, 2],
      sentence: "Mode high runs at 31.469 kHz, too fast for this screen.",
      detail: expect.stringMatching(
        /^525-line television takes 15\.577 to 15\.892 kHz\. Nearest that fits: 15\.892 kHz\. Nearest raster that fits: 480i60 /u,
      ) as string,
      limitSource: "standard",
    });
    // 27 MHz / 858: CTA-861 code 2 prints 31.469 kHz.
    expect(finding.measured).toBeCloseTo(31_468.53, 2);
    expect(labels(finding)).toEqual([
      "Use 240p60 (mode low)",
      expect.stringMatching(/^Make mode high 480i60 at 15\.\d{3} kHz$/u),
      "Leave slot 1 out",
      "Leave slot 2 out",
    ]);
    expect(finding.remedies[0]).toMatchObject({
      patch: [
        { path: "slots[1].mode", value: "low" },
        { path: "slots[2].mode", value: "low" },
      ],
    });
  });

  it("refuses a raster below the band, and a field rate outside it", () => {
    expect(theOne("screen.line-rate", { document: oneSlot({}), screen: monitor }).sentence).toContain("too slow");
    expect(
      theOne("screen.field-rate", { document: oneSlot({}, timingOf("288p50")), screen: television }),
    ).toMatchObject({ severity: "stop", limit: [58.44, 61.44] });
  });

  it("refuses interlace where the screen takes none, and a clock beyond its own", () => {
    const screen = { ...television, interlace: false, maxPixelClockHz: 20e6 };
    const document = oneSlot({}, timingOf("480i60"));
    expect(theOne("screen.interlace", { document, screen })).toMatchObject({ severity: "stop" });
    expect(theOne("screen.clock", { document, screen }).detail).toContain("20.000 MHz at most");
  });

  it("is inclusive to 1 part in 10⁶", () => {
    const exact = (rate: number) => ({
      ...television,
      bands: [{ lineRateHz: [15_000, rate] as [number, number], fieldRateHz: [58, 62] as [number, number] }],
    });
    const document = oneSlot({});
    const rate = 27e6 / 1716;
    expect(found("screen.line-rate", { document, screen: exact(rate) })).toEqual([]);
    expect(found("screen.line-rate", { document, screen: exact(rate / (1 + 0.9e-6)) })).toEqual([]);
    expect(found("screen.line-rate", { document, screen: exact(rate / (1 + 2e-6)) })).toHaveLength(1);
  });

  it("checks the rate that comes out where the output follows the input", () => {
    const follower = { ...lf8, outputClock: "input" as const };
    const document = oneSlot({ expects: { activePx: 720, activeLines: 576, interlaced: true, fieldRateHz: 50 } });
    const rules = checkProfile({ document, device: follower, screen: television })
      .filter(({ path }) => path === "slots[1].mode")
      .map(({ rule }) => rule);
    expect(rules).toContain("screen.line-rate");
    expect(rules).not.toContain("rate.slip");
  });

  it("cautions about idle rasters that are outside or unknown, and keeps them out of what is allowed", () => {
    const device = {
      ...lf8,
      idle: { switchOn: "unknown" as const, withoutInput: timingOf("480p60"), afterReset: timingOf("240p60") },
    };
    const idle = found("screen.idle", { document: oneSlot({}), device, screen: television });
    expect(idle.map(({ path, severity }) => [path, severity])).toEqual([
      ["device.idle.withoutInput.line-rate", "caution"],
      ["device.idle", "caution"],
    ]);
    expect(idle.every(({ detail }) => detail?.includes("unplugged"))).toBe(true);
    expect(isRasterAllowed(timingOf("240p60"), television)).toBe(true);
  });
});

describe("screen idle", () => {
  it("is told once where the device puts the same raster out at several moments", () => {
    const raster = timingOf("480p60");
    const device = { ...lf8, idle: { switchOn: raster, withoutInput: raster, afterReset: timingOf("240p60") } };
    const idle = theOne("screen.idle", { document: oneSlot({}), device, screen: television });
    expect(idle.sentence).toBe(
      "The raster at switch-on and without input runs at 31.469 kHz, too fast for this screen.",
    );
  });
});

describe("what softens a finding", () => {
  const bad = documentOf({
    modes: [
      { key: "1", timing: timingOf("480p60") },
      { key: "2", timing: timingOf("480p60") },
      { key: "3", timing: timingOf("480p60") },
    ],
    slots: [
      { number: 1, mode: "1" },
      { number: 2, mode: "2" },
    ],
  });
  const severities = (unchanged: { slots: number[]; modes: string[] } | undefined) =>
    Object.fromEntries(
      found("screen.line-rate", { document: bad, screen: television, unchanged }).map(({ path, severity }) => [
        path.slice(6, 7),
        severity,
      ]),
    );

  it("a mode that no changed slot uses is a caution at most, and one that stays unused says nothing", () => {
    expect(severities(undefined)).toEqual({ "1": "stop", "2": "stop", "3": "caution" });
    expect(severities({ slots: [2], modes: ["2", "3"] })).toEqual({ "1": "stop", "2": "caution" });
    expect(severities({ slots: [1, 2], modes: ["1", "2"] })).toEqual({
      "1": "caution",
      "2": "caution",
      "3": "caution",
    });
  });

  it("a mode that the device cannot hold stays a stop although no slot uses it, if it would be written", () => {
    const document = documentOf({ modes: [{ key: "1", timing: { ...timingOf("240p60"), pixelClockHz: 400e6 } }] });
    const severity = (modes: string[]) =>
      found("device.clock", { document, device: lf8, unchanged: { slots: [], modes } }).map(
        (finding) => finding.severity,
      );
    expect(severity([])).toEqual(["stop"]);
    expect(severity(["1"])).toEqual([]);
  });
});

describe("isRasterAllowed", () => {
  it("allows what has no stop of shape, screen or blanking, and nothing else", () => {
    const timing = timingOf("240p60");
    expect(isRasterAllowed(timing, television)).toBe(true);
    expect(isRasterAllowed(timing, undefined)).toBe(true);
    expect(isRasterAllowed(timing, monitor)).toBe(false);
    expect(isRasterAllowed({ ...timing, vertical: { ...timing.vertical, sync: 0 } }, undefined)).toBe(false);
    expect(isRasterAllowed({ ...timing, pixelClockHz: 0 }, undefined)).toBe(false);
    expect(
      isRasterAllowed({ ...timing, horizontal: { ...timing.horizontal, sync: 100, backPorch: 138 } }, television),
    ).toBe(false);
  });

  it("says the same as the checks of every published raster on every preset", () => {
    for (const { envelope: screen } of screenPresets) {
      for (const { timing } of ctaCatalogue) {
        const families = ["shape", "screen", "blanking"];
        const stops = checkProfile({ document: oneSlot({}, timing), screen }).filter(
          ({ rule, severity }) => severity === "stop" && families.includes(rule.split(".")[0] ?? ""),
        );
        expect(isRasterAllowed(timing, screen)).toBe(stops.length === 0);
      }
    }
  });
});

describe("standards", () => {
  it("no check cautions against a standard's own raster", () => {
    const timings = [
      ...standardNames.map((name) => standardRaster(name).timing),
      ...ctaCatalogue.map(({ timing }) => timing),
    ];
    for (const timing of timings) {
      const findings = checkProfile({ document: oneSlot({}, timing) }).filter(({ rule }) => rule !== "unknown.screen");
      expect(findings).toEqual([]);
    }
  });

  it.each([
    ["bt470-525", ["240p60", "480i60"]],
    ["bt470-625", ["288p50", "576i50"]],
    ["bt470-both", ["240p60", "480i60", "288p50", "576i50"]],
    ["vic1-31k", ["480p60", "480p60-640"]],
  ] as const)("the screen %s allows the rasters that it is made for", (id, names) => {
    const screen = screenPresets.find((preset) => preset.id === id)?.envelope;
    for (const name of names) expect(isRasterAllowed(timingOf(name), screen)).toBe(true);
  });
});
