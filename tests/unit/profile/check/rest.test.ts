import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { checkProfile } from "@/lib/profile/check/check-profile";
import { checkRecall } from "@/lib/profile/check/check-recall";
import type { CheckInput } from "@/lib/profile/check/context";
import type { Severity } from "@/lib/profile/finding";
import { applyPatch } from "@/lib/profile/paths";
import {
  anyProfile,
  bothTelevision,
  documentOf,
  lf8,
  monitor,
  oneSlot,
  television,
  timingOf,
} from "@/tests/unit/profile/samples";
import { found, labels, theOne } from "./find";

const source = { activePx: 1280, activeLines: 720, interlaced: false, fieldRateHz: 60 };

describe("shape", () => {
  it("stops a mode that is missing, a timing that is no raster, a source that cannot be", () => {
    expect(
      theOne("shape.mode-missing", { document: oneSlot({ mode: "b" }) }).remedies.map(({ label }) => label),
    ).toEqual(["Use 240p60 (mode a)", "Leave slot 1 out"]);
    const broken = { ...timingOf("240p60"), vertical: { ...timingOf("240p60").vertical, sync: -1 } };
    expect(theOne("shape.timing", { document: oneSlot({}, broken), screen: television }).path).toBe(
      "modes[a].timing.vertical.sync",
    );
    expect(theOne("shape.source", { document: oneSlot({ expects: { ...source, activeLines: 0 } }) }).severity).toBe(
      "stop",
    );
  });

  it("stops trim that leaves nothing of the picture, and offers none", () => {
    const document = { ...oneSlot({ expects: source }), everywhere: { trim: { topLines: 400, bottomLines: 320 } } };
    const finding = theOne("shape.nothing-left", { document });
    expect(finding).toMatchObject({ severity: "stop", slots: [1], path: "everywhere.trim" });
    const [remedy] = finding.remedies;
    if (remedy?.kind !== "set") throw new Error("no remedy");
    expect(found("shape.nothing-left", { document: applyPatch(document, remedy.patch) })).toEqual([]);
  });
});

describe("picture", () => {
  it("cautions that circles are too tall: made for 16 : 9, shown on 4 : 3", () => {
    const document = { ...oneSlot({}), madeFor: { screen: { name: "wide", bands: [], aspect: "16:9" } } };
    // (16 / 9) / (4 / 3) = 4 / 3.
    expect(theOne("picture.aspect", { document, screen: television }).sentence).toBe(
      "Made for 16 : 9 and shown on 4 : 3: circles are 1.33 × too tall.",
    );
    expect(theOne("picture.aspect", { document, screen: { ...television, aspect: "21:9" } }).sentence).toContain(
      "too wide",
    );
    expect(found("picture.aspect", { document, screen: { ...television, aspect: "16:9" } })).toEqual([]);
  });

  it("counts the lines and px that the frame hides, and offers sizes that are seen whole", () => {
    const screen = { ...television, visiblePct: { left: 0, right: 0, top: 2.5, bottom: 2.5 } };
    const finding = theOne("picture.hidden", {
      document: oneSlot({ placement: { heightPct: 100, widthPct: 100, offsetPx: 0, offsetLines: 0 } }),
      screen,
      device: lf8,
    });
    expect(finding.sentence).toBe("12 of 240 lines of slot 1's picture lie behind this screen's frame.");
    expect(finding.severity).toBe("caution");
    // 228 of 240 lines are 95 %; the device's steps are 0.4 % from 80.
    expect(labels(finding)).toEqual(["Use 95.2 %"]);
    expect(
      found("picture.hidden", { document: oneSlot({ placement: { heightPct: 95.2 } }), screen, device: lf8 }),
    ).toEqual([]);
  });
});

describe("sync", () => {
  it("stops a kind that the screen does not take, and offers those that both have", () => {
    const finding = theOne("sync.kind", {
      document: oneSlot({ syncKind: "composite" }, timingOf("480p60")),
      screen: monitor,
      device: lf8,
    });
    expect(finding).toMatchObject({
      severity: "stop",
      sentence: "Slot 1 gives composite sync, which this screen does not take.",
    });
    expect(labels(finding)).toEqual(["Use separate sync", "Leave slot 1 out"]);
  });

  it("cautions about a level that is too strong or too weak at the screen's load", () => {
    const output = (vpp: number, sourceOhm: number) => ({
      ...lf8,
      syncOutputs: [{ kind: "composite" as const, vpp, sourceOhm }],
    });
    const level = (vpp: number, sourceOhm: number) =>
      found("sync.level", {
        document: oneSlot({ syncKind: "composite" }),
        screen: television,
        device: output(vpp, sourceOhm),
      });
    expect(level(2.1, 75)[0]).toMatchObject({
      severity: "caution",
      measured: 1.05,
      sentence: "Composite sync can be too strong for this screen.",
    });
    expect(level(0.2, 75)[0]?.sentence).toContain("too weak");
    expect(level(0.6, 75)).toEqual([]);
  });

  it("tells a level once a kind of sync, for the slots that change", () => {
    const slots = [1, 2, 3].map((number) => ({ number, syncKind: "composite" as const }));
    const level = (unchanged: number[]) =>
      theOne("sync.level", {
        document: documentOf({ slots }),
        device: lf8,
        screen: television,
        unchanged: { slots: unchanged, modes: [] },
      });
    expect(level([1])).toMatchObject({ severity: "caution", path: "slots[2].syncKind", slots: [2, 3] });
    expect(level([1, 2, 3])).toMatchObject({ severity: "note", path: "slots[1].syncKind", slots: [1, 2, 3] });
  });

  it("names the resistor of E24 that brings a level to the middle of what the screen lists", () => {
    // By hand, 5 V behind 75 Ω into 75 Ω for 0.3 V: 75 · 5 / 0.3 − 75 − 75 = 1 100 Ω, which IEC 60063 has.
    const device = { ...lf8, syncOutputs: [{ kind: "composite" as const, vpp: 5, sourceOhm: 75 }] };
    const screen = { ...television, syncVpp: [0.2, 0.4] as const, loadOhm: 75 };
    const { detail } = theOne("sync.level", { document: oneSlot({ syncKind: "composite" }), screen, device });
    expect(detail?.replaceAll("\u2009", " ")).toContain("an in-line resistor of 1 100 Ω (E24), which gives 0.3 V.");
    // 75 · 5 / 0.31 − 150 = 1 060: of 1 000 and 1 100 Ω the nearer to 0.31 V is 1.1 kΩ with 0.3 V.
    const other = { ...screen, syncVpp: [0.21, 0.41] as const };
    const off = theOne("sync.level", { document: oneSlot({ syncKind: "composite" }), screen: other, device });
    expect(off.detail?.replaceAll("\u2009", " ")).toContain("1 100 Ω (E24), which gives 0.3 V.");
  });

  it("states a level that ngspice gives for the same divider", () => {
    // ngspice, one resistor chain, .op: 5 V behind 50 Ω and 430 Ω in series into 75 Ω give 0.675 676 V.
    const device = { ...lf8, syncOutputs: [{ kind: "composite" as const, vpp: 5, sourceOhm: 480 }] };
    expect(
      theOne("sync.level", { document: oneSlot({ syncKind: "composite" }), screen: television, device }).measured,
    ).toBeCloseTo(0.675676, 5);
  });
});

describe("rate", () => {
  it("notes that a frame repeats or drops every n s, n being 1 / difference", () => {
    const note = theOne("rate.slip", { document: oneSlot({ expects: source }), device: lf8 });
    // CTA-861 code 8 runs at 60.054 Hz: 1 / 0.054 449 is 18.4 s.
    expect(note).toMatchObject({
      severity: "note",
      sentence: "A frame repeats every 18 s in slot 1.",
      detail: "60.000 Hz comes in, 60.054 Hz goes out.",
    });
    expect(
      theOne("rate.slip", { document: oneSlot({ expects: { ...source, fieldRateHz: 61 } }), device: lf8 }).sentence,
    ).toContain("drops");
    // What brings the two nearer on the steps of this clock (50 kHz): as clocks of the mode that the slot shows.
    const [first] = note.remedies;
    expect(first).toMatchObject({ kind: "set", patch: [{ path: expect.stringMatching(/timing\.pixelClockHz$/u) as string }, { path: expect.stringMatching(/backPorch$/u) as string }] });
    expect(first?.label).toMatch(/^Use [\d.]+\sMHz, [\d\s]+\sclocks: (?:none|(?:repeats|drops) every \d+\s(?:minutes|hours))$/u);
  });

  it("notes nothing where the rates are the same, or the output follows the input", () => {
    const same = oneSlot({ expects: { ...source, fieldRateHz: 27e6 / 1716 / 262 } });
    expect(found("rate.slip", { document: same, device: lf8 })).toEqual([]);
    expect(
      found("rate.slip", { document: oneSlot({ expects: source }), device: { ...lf8, outputClock: "input" } }),
    ).toEqual([]);
  });
});

describe("unknown", () => {
  it("says which limits of the screen nobody stated, each under a path of its own, as far as the document needs them", () => {
    const screen = { name: "bare", bands: [] };
    const paths = (input: CheckInput) => found("unknown.screen", input).map(({ path }) => path);
    expect(
      paths({ document: oneSlot({ syncKind: "composite", placement: { widthPct: 90 } }, timingOf("480i60")), screen }),
    ).toEqual([
      "screen.bands",
      "screen.maxPixelClockHz",
      "screen.minSyncUs",
      "screen.minBackPorchUs",
      "screen.minFieldBlankUs",
      "screen.interlace",
      "screen.syncKinds",
      "screen.syncVpp",
      "screen.visiblePct",
    ]);
    expect(paths({ document: documentOf({ slots: [{ number: 1, name: "x" }] }), screen })).toEqual([]);
    expect(paths({ document: oneSlot({}), screen: undefined })).toEqual(["screen"]);
    expect(paths({ document: oneSlot({}), screen: television })).toEqual([
      "screen.maxPixelClockHz",
      "screen.minBackPorchUs",
    ]);
  });
});

describe("checkRecall", () => {
  const document = documentOf({
    modes: [
      { key: "1", timing: timingOf("240p60") },
      { key: "5", timing: timingOf("480p60") },
    ],
    slots: [
      { number: 1, mode: "1", syncKind: "composite", placement: { heightPct: 120 } },
      { number: 5, mode: "5", syncKind: "separate" },
      { number: 6 },
    ],
  });
  const recall = (slot: number, nothingArrives = false, device = lf8) =>
    checkRecall({ document, slot, device, screen: television, source, nothingArrives });
  const stops = (findings: ReturnType<typeof recall>) =>
    findings.filter(({ severity }) => severity === "stop").map(({ rule }) => rule);

  it("stops a slot whose mode or sync the screen does not take, or that is empty, and judges no other slot or value", () => {
    expect(stops(recall(1))).toEqual([]);
    expect(stops(recall(5))).toEqual(["screen.line-rate", "blanking.sync", "sync.kind"]);
    expect(stops(recall(6))).toEqual(["shape.mode-missing"]);
  });

  it("judges the idle raster where nothing arrives: outside is a stop, unknown a caution", () => {
    const idle = (withoutInput: typeof lf8.idle.withoutInput) => ({ ...lf8, idle: { ...lf8.idle, withoutInput } });
    expect(stops(recall(1, true, idle(timingOf("480p60"))))).toEqual(["screen.idle"]);
    expect(stops(recall(1, false, idle(timingOf("480p60"))))).toEqual([]);
    expect(stops(recall(1, true, idle(timingOf("240p60"))))).toEqual([]);
    expect(recall(1, true, idle("unknown"))).toContainEqual(
      expect.objectContaining({ rule: "screen.idle", severity: "caution" }),
    );
  });

  it("says that nothing could be checked where the screen is unknown", () => {
    const findings = checkRecall({ document, slot: 5, device: lf8, source, nothingArrives: false });
    expect(findings.map(({ rule }) => rule)).toEqual(["unknown.screen"]);
  });
});

describe("every remedy", () => {
  const rank: Readonly<Record<Severity, number>> = { note: 0, caution: 1, stop: 2 };
  const keyOf = (rule: string, path: string) => `${rule} ${path}`;

  it("that sets values makes its finding pass, or a slip rarer, and throws nothing", () => {
    fc.assert(
      fc.property(
        anyProfile,
        fc.constantFrom(television, bothTelevision, monitor),
        fc.boolean(),
        (document, screen, cuts) => {
          const device = cuts ? { ...lf8, outsideRaster: "cuts" as const } : lf8;
          const check = (of: typeof document) => checkProfile({ document: of, device, screen, source });
          for (const finding of check(document)) {
            for (const remedy of finding.remedies) {
              if (remedy.kind !== "set") continue;
              const after = check(applyPatch(document, remedy.patch)).filter(
                ({ rule, path }) => keyOf(rule, path) === keyOf(finding.rule, finding.path),
              );
              // A slip that no step of the clock closes comes less often.
              const isBetter = (one: typeof finding) =>
                finding.rule === "rate.slip" ? Number(one.measured) > Number(finding.measured) : rank[one.severity] < rank[finding.severity];
              expect(
                after.every(isBetter),
                `${finding.rule}: ${remedy.label}`,
              ).toBe(true);
            }
          }
        },
      ),
      { numRuns: 60 },
    );
  });

  it("is offered in words of this product: sentences end with a stop, and no figure has a hyphen for a minus", () => {
    fc.assert(
      fc.property(anyProfile, (document) => {
        for (const { sentence, detail = "" } of checkProfile({ document, device: lf8, screen: television, source })) {
          expect(sentence).toMatch(/[.]$/u);
          expect(`${sentence} ${detail}`).not.toMatch(/ -\d|!|NaN|undefined|Infinity/u);
        }
      }),
      { numRuns: 40 },
    );
  });
});
