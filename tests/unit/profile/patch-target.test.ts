import { describe, expect, test } from "vitest";
import type { ProfileDocument } from "@/lib/profile/document";
import { patchTarget } from "@/lib/profile/patch-target";

const timing = {
  pixelClockHz: 27_000_000,
  interlaced: false,
  horizontal: { active: 1440, frontPorch: 38, sync: 124, backPorch: 114, polarity: "negative" as const },
  vertical: { active: 240, frontPorch: 4, sync: 3, backPorch: 15, polarity: "negative" as const },
};
const profile: ProfileDocument = {
  format: "backporch-profile",
  version: 1,
  modes: [{ key: "wide", timing }],
  slots: [{ number: 2, mode: "wide" }],
};
const merged: ProfileDocument = {
  ...profile,
  modes: [
    { key: "3", timing },
    { key: "7", name: "240p60", timing },
  ],
  slots: [{ number: 2, mode: "3" }],
};

describe("a remedy taken in a profile", () => {
  test("sets a value of a slot by its number, which both documents share", () => {
    const { document, added } = patchTarget(profile, merged, { wide: "3" }, [
      { path: "slots[2].placement.heightPct", value: 97.6 },
    ]);
    expect(document.slots?.[0]?.placement?.heightPct).toBe(97.6);
    expect(added).toEqual([]);
  });

  test("finds the profile's own key for a mode that the device numbers", () => {
    const { document, patches } = patchTarget(profile, merged, { wide: "3" }, [
      { path: "modes[3].name", value: "240" },
    ]);
    expect(document.modes?.[0]).toMatchObject({ key: "wide", name: "240" });
    expect(patches).toEqual([{ path: "modes[wide].name", value: "240" }]);
  });

  test("takes over a mode of the device, whole, before a slot points at it", () => {
    const { document, added } = patchTarget(profile, merged, { wide: "3" }, [{ path: "slots[2].mode", value: "7" }]);
    expect(added).toEqual(["7"]);
    expect(document.modes?.find((mode) => mode.key === "7")?.timing).toEqual(timing);
    expect(document.slots?.[0]?.mode).toBe("7");
  });

  test("gives it another key where the profile uses that one for a mode of its own", () => {
    const own: ProfileDocument = { ...profile, modes: [{ key: "7", timing }] };
    const { document } = patchTarget(own, merged, { "7": "3" }, [{ path: "slots[2].mode", value: "7" }]);
    expect(document.slots?.[0]?.mode).toBe("7-1");
    expect(document.modes?.map((mode) => mode.key)).toEqual(["7", "7-1"]);
  });
});
