import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { canonicalJson } from "@/lib/profile/canonical";
import { hasStop } from "@/lib/profile/check/check-profile";
import type { ProfileDocument } from "@/lib/profile/document";
import { overlay } from "@/lib/profile/overlay";
import { findMode, findSlot } from "@/lib/profile/paths";
import { roundTiming } from "@/lib/profile/round";
import { sameRaster } from "@/lib/timing/same-raster";
import { anyBase, anyProfile, documentOf, lf8, oneSlot, timingOf } from "./samples";

const lay = (base: ProfileDocument, profile: ProfileDocument, leftOut: readonly number[] = [], limits = lf8) =>
  overlay({ base, profile, leftOut, limits });
const rules = (laid: ReturnType<typeof lay>) => laid.findings.map(({ rule, severity }) => `${severity} ${rule}`);

const base = documentOf({
  everywhere: { trim: { leftPx: 4 }, powerOnSlot: 1 },
  modes: [
    { key: "1", name: "one", timing: timingOf("480i60") },
    { key: "2", name: "two", timing: timingOf("288p50") },
    { key: "3", name: "three", timing: timingOf("240p60") },
    { key: "4", name: "four", timing: timingOf("240p60") },
  ],
  slots: [
    {
      number: 1,
      name: "First",
      mode: "1",
      placement: { widthPct: 96, heightPct: 96, offsetPx: 0, offsetLines: 0 },
      syncKind: "composite",
    },
    { number: 2, name: "Second", mode: "1" },
    { number: 3, name: "Third", mode: "2" },
  ],
});
const shifted = {
  ...timingOf("240p60"),
  horizontal: { ...timingOf("240p60").horizontal, frontPorch: 30, backPorch: 122 },
};

describe("overlay: what is not named stays", () => {
  it("replaces the values that the profile names and no other", () => {
    const { merged } = lay(base, documentOf({ slots: [{ number: 1, placement: { heightPct: 97.6 } }] }));
    expect(findSlot(merged, 1)).toEqual({
      number: 1,
      name: "First",
      mode: "1",
      placement: { widthPct: 96, heightPct: 97.6, offsetPx: 0, offsetLines: 0 },
      syncKind: "composite",
    });
    expect(merged.slots?.slice(1)).toEqual(base.slots?.slice(1));
    expect(merged.modes).toEqual(base.modes);
  });

  it("takes a field that holds undefined for one that is not named", () => {
    const nothing = documentOf({
      everywhere: { powerOnSlot: undefined, trim: { leftPx: undefined } },
      slots: [{ number: 1, name: undefined, mode: undefined, placement: { widthPct: undefined }, syncKind: undefined }],
    });
    expect(lay(base, nothing).merged).toEqual(base);
    expect(lay(base, nothing).unchanged.slots).toEqual([1, 2, 3]);
  });

  it("never changes a left-out slot, nor what it shares: its mode's timing and name, and trim", () => {
    fc.assert(
      fc.property(anyBase, anyProfile, fc.subarray([1, 2, 3, 4, 5]), (from, profile, leftOut) => {
        const { merged } = lay(from, profile, leftOut);
        for (const number of leftOut) {
          const before = findSlot(from, number);
          expect(findSlot(merged, number)).toEqual(before);
          if (before?.mode !== undefined) expect(findMode(merged, before.mode)).toEqual(findMode(from, before.mode));
        }
        if (leftOut.length > 0) expect(merged.everywhere?.trim).toEqual(from.everywhere?.trim);
      }),
      { numRuns: 60 },
    );
  });

  it("says that trim stays where a left-out slot shares it", () => {
    const profile = documentOf({ everywhere: { trim: { leftPx: 8 }, powerOnSlot: 2 } });
    expect(lay(base, profile).merged.everywhere).toEqual({ powerOnSlot: 2, trim: { leftPx: 8 } });
    const held = lay(base, profile, [3]);
    expect(held.merged.everywhere).toEqual({ powerOnSlot: 2, trim: { leftPx: 4 } });
    expect(rules(held)).toEqual(["note device.trim-shared"]);
  });

  it("changes nothing when it is laid a second time", () => {
    fc.assert(
      fc.property(anyBase, anyProfile, (from, profile) => {
        const once = lay(from, profile);
        fc.pre(!hasStop(once.findings));
        expect(canonicalJson(lay(once.merged, profile).merged)).toBe(canonicalJson(once.merged));
      }),
      { numRuns: 60 },
    );
  });
});

describe("overlay: where modes find their place", () => {
  it("takes the device mode of equal rounded timing: the one its slots use, else the lowest", () => {
    const nearly = { ...timingOf("240p60"), pixelClockHz: 27_010_000 };
    expect(roundTiming(nearly, lf8).pixelClockHz).toBe(27_000_000);
    const profile = oneSlot({ number: 1 }, nearly);
    expect(lay(base, profile).modeMap).toEqual({ a: "3" });
    const onFour = { ...base, slots: [{ number: 1, mode: "4" }] };
    expect(lay(onFour, profile).modeMap).toEqual({ a: "4" });
    expect(findMode(lay(onFour, profile).merged, "4")?.timing).toEqual(timingOf("240p60"));
  });

  it("then the lowest mode that its slots alone use", () => {
    expect(
      lay(base, documentOf({ modes: [{ key: "a", timing: shifted }], slots: [{ number: 3, mode: "a" }] })).modeMap,
    ).toEqual({ a: "2" });
    const both = documentOf({
      modes: [{ key: "a", timing: shifted }],
      slots: [
        { number: 1, mode: "a" },
        { number: 2, mode: "a" },
      ],
    });
    expect(lay(base, both).modeMap).toEqual({ a: "1" });
  });

  it("not a mode that another slot stays on, a left-out one among them: then the lowest free one, and lists what it overwrites", () => {
    const one = documentOf({ modes: [{ key: "a", name: "new", timing: shifted }], slots: [{ number: 1, mode: "a" }] });
    const laid = lay(base, one);
    expect(laid.modeMap).toEqual({ a: "3" });
    expect(rules(laid)).toEqual(["note device.mode-overwritten"]);
    expect(laid.findings[0]?.sentence).toBe("Mode 3 of the device, “three”, is overwritten by “new”.");
    const both = {
      ...one,
      slots: [
        { number: 1, mode: "a" },
        { number: 2, mode: "a" },
      ],
    };
    expect(lay(base, both, [2]).modeMap).toEqual({ a: "3" });
  });

  it("gives an empty mode without saying that it is overwritten", () => {
    const laid = lay({ ...base, modes: base.modes?.slice(0, 2) }, oneSlot({ number: 1 }, shifted));
    expect(laid.modeMap).toEqual({ a: "3" });
    expect(laid.findings).toEqual([]);
  });

  it("does not give a mode twice, nor one that was in use before", () => {
    const profile = documentOf({
      modes: [
        { key: "a", timing: shifted },
        { key: "b", timing: timingOf("576i50") },
      ],
      slots: [
        { number: 1, mode: "a" },
        { number: 2, mode: "b" },
      ],
    });
    expect(lay(base, profile).modeMap).toEqual({ a: "1", b: "3" });
  });

  it("stops where the device has no room, and offers to leave the slots out", () => {
    const small = { ...lf8, modeCapacity: 2 };
    const full = { ...base, modes: base.modes?.slice(0, 2) };
    const laid = lay(full, oneSlot({ number: 1 }, shifted), [], small);
    expect(rules(laid)).toEqual(["stop device.mode-room"]);
    expect(laid.findings[0]?.remedies).toEqual([{ kind: "leave-out", label: "Leave slot 1 out", slot: 1 }]);
    expect(lay(full, oneSlot({ number: 1 }, shifted), [1], small).findings).toEqual([]);
    expect(laid.merged.slots).toEqual(base.slots);
  });

  it("looks mode keys up in the profile alone, although the device has modes of that number", () => {
    const laid = lay(base, documentOf({ modes: [], slots: [{ number: 1, mode: "3" }] }));
    expect(rules(laid)).toEqual(["stop shape.mode-missing"]);
    expect(findSlot(laid.merged, 1)?.mode).toBe("1");
    const crossed = documentOf({
      modes: [{ key: "1", timing: timingOf("288p50") }],
      slots: [{ number: 1, mode: "1" }],
    });
    expect(lay(base, crossed).modeMap).toEqual({ "1": "2" });
  });

  it("keeps a slot's mode where the profile's mode has no timing, and says so", () => {
    const laid = lay(base, documentOf({ modes: [{ key: "a" }], slots: [{ number: 3, mode: "a" }] }));
    expect(rules(laid)).toEqual(["note device.mode-without-timing"]);
    expect(findSlot(laid.merged, 3)?.mode).toBe("2");
  });

  it("stops a profile that names a slot or a mode twice", () => {
    const twice = documentOf({ modes: [{ key: "a" }, { key: "a" }], slots: [{ number: 1 }, { number: 1 }] });
    expect(rules(lay(base, twice))).toEqual(["stop shape.duplicate-slot", "stop shape.duplicate-mode"]);
  });

  it("never overwrites a mode that a slot stays on, and points every slot at the timing that the profile names", () => {
    fc.assert(
      fc.property(anyBase, anyProfile, (from, profile) => {
        const { merged, modeMap, findings } = lay(from, profile);
        fc.pre(!hasStop(findings));
        for (const slot of from.slots ?? []) {
          const named = findSlot(profile, slot.number);
          if (slot.mode === undefined || named?.mode !== undefined) continue;
          expect(findMode(merged, slot.mode)?.timing).toEqual(findMode(from, slot.mode)?.timing);
        }
        for (const slot of profile.slots ?? []) {
          const timing = slot.mode === undefined ? undefined : findMode(profile, slot.mode)?.timing;
          if (!timing) continue;
          const mode = findSlot(merged, slot.number)?.mode ?? "";
          expect(mode).toBe(modeMap[slot.mode ?? ""]);
          const held = findMode(merged, mode)?.timing;
          expect(held && sameRaster(roundTiming(held, lf8), roundTiming(timing, lf8))).toBe(true);
        }
      }),
      { numRuns: 60 },
    );
  });
});

describe("overlay: what is unchanged", () => {
  it("names slots that stay and modes that no changed slot uses, judged by rounded values", () => {
    const rounded = lay(base, documentOf({ slots: [{ number: 1, placement: { widthPct: 95.9 } }] }));
    expect(rounded.unchanged).toEqual({ slots: [1, 2, 3], modes: ["1", "2", "3", "4"] });
    const moved = lay(base, documentOf({ slots: [{ number: 1, placement: { widthPct: 97 } }] }));
    expect(moved.unchanged).toEqual({ slots: [2, 3], modes: ["2", "3", "4"] });
  });

  it("does not call a mode unchanged that is written although no slot uses it", () => {
    const laid = lay(base, documentOf({ modes: [{ key: "spare", timing: shifted }] }));
    expect(laid.modeMap).toEqual({ spare: "3" });
    expect(laid.unchanged).toEqual({ slots: [1, 2, 3], modes: ["1", "2", "4"] });
  });

  it("does not take what a slot expects for a change: no device holds it", () => {
    const expects = { activePx: 1280, activeLines: 720, interlaced: false, fieldRateHz: 60 };
    expect(lay(base, documentOf({ slots: [{ number: 1, expects }] })).unchanged.slots).toEqual([1, 2, 3]);
  });
});
