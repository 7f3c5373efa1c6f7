import { describe, expect, it } from "vitest";
import { compareVersions } from "@/lib/profile/check/firmware";
import { inputLocks } from "@/lib/profile/check/device-input";
import { documentOf, lf8, oneSlot, timingOf } from "@/tests/unit/profile/samples";
import { found, labels, theOne } from "./find";

const source720 = { activePx: 1280, activeLines: 720, interlaced: false, fieldRateHz: 60 };

describe("device", () => {
  it("stops what is beyond its range, with the nearest end", () => {
    const finding = theOne("device.range", { document: oneSlot({ placement: { offsetPx: 70 } }), device: lf8 });
    expect(finding).toMatchObject({
      severity: "stop",
      path: "slots[1].placement.offsetPx",
      limit: [-64, 63],
      detail: "Lanternfield LF-8 takes −64 to 63 px.",
    });
    expect(labels(finding)).toEqual(["Use 63 px", "Leave slot 1 out"]);
  });

  it("notes what it rounds: width moves in steps of 0.4 %, 95.1 becomes 95.2", () => {
    expect(theOne("device.step", { document: oneSlot({ placement: { widthPct: 95.1 } }), device: lf8 })).toMatchObject({
      severity: "note",
      sentence: "Slot 1's width is rounded on this device.",
      detail: "Width moves in steps of 0.4 %: 95.1 % becomes 95.2 %.",
    });
  });

  it("stops a clock beyond its own and totals beyond its counters", () => {
    const slow = { ...timingOf("240p60"), pixelClockHz: 4e6 };
    expect(theOne("device.clock", { document: oneSlot({}, slow), device: lf8 }).detail).toContain(
      "5.000 MHz to 165.000 MHz".replace(" MHz to", " to"),
    );
    const device = { ...lf8, maxLineTotal: 1000, maxFieldLines: 250 };
    expect(found("device.totals", { document: oneSlot({}), device }).map(({ measured }) => measured)).toEqual([
      1716, 262,
    ]);
  });

  it("stops horizontal figures that are no multiple, and interlace that it has not", () => {
    const device = { ...lf8, horizontalMultiple: 4, interlace: false };
    const document = oneSlot({}, timingOf("480i60"));
    const multiple = found("device.multiple", { document, device });
    // CTA-861 code 6: 1 440 + 38 + 124 + 114; 38 and 114 are no multiples of 4.
    expect(multiple.map(({ measured, remedies }) => [measured, remedies[0]?.label])).toEqual([
      [38, "Use 40 px"],
      [114, "Use 116 px"],
    ]);
    expect(theOne("device.interlace", { document, device }).severity).toBe("stop");
  });

  it("stops slots and modes that it has no room for", () => {
    expect(theOne("device.slots", { document: oneSlot({ number: 9 }), device: lf8 })).toMatchObject({
      severity: "stop",
      limit: [1, 8],
    });
    const modes = Array.from({ length: 33 }, (_, index) => ({ key: String(index) }));
    expect(theOne("device.modes", { document: documentOf({ modes }), device: lf8 })).toMatchObject({
      measured: 33,
      limit: 32,
    });
  });

  it("stops names that are too long or have characters that it does not show, and offers one that fits", () => {
    const long = theOne("device.name-length", { document: oneSlot({ name: "Cabinet A, upright" }), device: lf8 });
    expect(long.sentence).toBe("Slot 1's name has 18 characters, and this device holds 16.");
    expect(labels(long)).toEqual(["Use “Cabinet A, uprig”", "Leave slot 1 out"]);
    expect(labels(theOne("device.name-characters", { document: oneSlot({ name: "Köln" }), device: lf8 }))[0]).toBe(
      "Use “Kln”",
    );
  });

  it("stops a word that it does not have, and offers those that it has", () => {
    const device = { ...lf8, choices: { ...lf8.choices, "slots[*].syncKind": ["composite", "separate"] } };
    expect(labels(theOne("device.choice", { document: oneSlot({ syncKind: "onGreen" }), device }))).toEqual([
      "Use composite",
      "Use separate",
      "Leave slot 1 out",
    ]);
  });

  it("cautions about settings that it lacks, once a setting, and judges none of their values", () => {
    const { "slots[*].placement.heightPct": _height, ...numbers } = lf8.numbers;
    const device = { ...lf8, numbers };
    const document = documentOf({
      modes: [{ key: "a", timing: timingOf("240p60") }],
      slots: [
        { number: 1, mode: "a", placement: { heightPct: 108 } },
        { number: 2, placement: { heightPct: 90 } },
      ],
    });
    const finding = theOne("device.lacks", { document, device });
    expect(finding).toMatchObject({ severity: "caution", path: "slots[*].placement.heightPct", slots: [1, 2] });
    expect(found("placement.vertical", { document, device })).toEqual([]);
  });

  it("cautions about an input of another device, and keeps the device's own", () => {
    const finding = theOne("device.lacks", { document: oneSlot({ input: "aux 9" }), device: lf8 });
    expect(finding.sentence).toBe("This device has no input “aux 9”.");
    expect(finding.remedies[0]).toMatchObject({ patch: [{ path: "slots[1].input", value: null }] });
  });

  it("stops an input that does not lock to what the slot expects, and cautions where nobody knows", () => {
    const expects = { activePx: 720, activeLines: 240, interlaced: false, fieldRateHz: 60 };
    expect(theOne("device.input", { document: oneSlot({ input: "digital-1", expects }), device: lf8 })).toMatchObject({
      severity: "stop",
      sentence: "digital 1 does not lock to what slot 1 expects.",
    });
    const interlaced = { activePx: 1920, activeLines: 1080, interlaced: true, fieldRateHz: 70 };
    expect(
      theOne("device.input", { document: oneSlot({ input: "digital-1", expects: interlaced }), device: lf8 }).severity,
    ).toBe("caution");
    expect(
      found("device.input", { document: oneSlot({ input: "digital-1", expects: source720 }), device: lf8 }),
    ).toEqual([]);
    expect(inputLocks({ name: "x", label: "x", accepts: [] }, source720)).toBe("unknown");
  });

  it("takes the source that is given before what the slot expects", () => {
    const document = oneSlot({
      input: "digital-1",
      expects: { activePx: 720, activeLines: 240, interlaced: false, fieldRateHz: 60 },
    });
    expect(found("device.input", { document, device: lf8, source: source720 })).toEqual([]);
  });

  it("cautions about firmware outside the driver's, compared part by part", () => {
    expect(compareVersions("3.10", "3.4")).toBeGreaterThan(0);
    expect(compareVersions("3.4.0", "3.4")).toBe(0);
    const running = (version: string | undefined) => ({
      document: oneSlot({}),
      device: { ...lf8, firmware: { ...lf8.firmware, running: version } },
    });
    expect(theOne("device.firmware", running("3.10")).severity).toBe("caution");
    expect(found("device.firmware", running("3.4"))).toEqual([]);
    expect(found("unknown.device", running(undefined)).map(({ path }) => path)).toContain("device.firmware");
  });
});
