import { describe, expect, test } from "vitest";
import { alsoMoved, settingRows } from "@/components/bench/setting-rows";
import { reviewGroups } from "@/components/bench/review-rows";
import { slotLines } from "@/components/bench/slot-lines";
import { settingName } from "@/components/bench/setting-name";
import { applyPatch } from "@/lib/profile/paths";
import { documentFromNative } from "@/lib/serial/backup/document";
import { shippedDriver } from "@/lib/serial/drivers/shipped";
import { deviceLimits } from "@/lib/serial/limits";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";

const driver = compiledDriver(shippedDriver("lanternfield-lf8"));
const limits = deviceLimits(driver.definition);
const values = Object.fromEntries(driver.settings.map((setting) => [setting.key, setting.initial]));
const now = documentFromNative(driver, values);
const filled = now.slots?.find((slot) => slot.mode !== undefined);
const slot = filled?.number ?? 0;

describe("settings by what they act on", () => {
  test("a slot's rows are that slot's own, each with the device's range or words", () => {
    const rows = settingRows("slot", now, now, limits, slot);
    expect(rows.map((row) => row.path)).toContain(`slots[${slot}].placement.offsetPx`);
    expect(rows.every((row) => row.path.startsWith(`slots[${slot}].`) && (row.range ?? row.choices))).toBe(true);
  });

  test("a mode's rows move the porches of the slot's mode and leave its totals to whole rasters", () => {
    const rows = settingRows("mode", now, now, limits, slot);
    expect(rows.map((row) => row.path.split(".").slice(1).join("."))).toEqual([
      "timing.horizontal.frontPorch", "timing.horizontal.backPorch", "timing.vertical.frontPorch", "timing.vertical.backPorch",
    ]);
    expect(rows.every((row) => row.path.startsWith(`modes[${filled?.mode}]`))).toBe(true);
  });

  test("says which other slots a change moves", () => {
    const shared = applyPatch(now, (now.slots ?? []).filter((one) => one.mode !== undefined).map((one) => ({ path: `slots[${one.number}].mode`, value: filled?.mode ?? "" })));
    const others = (now.slots ?? []).filter((one) => one.mode !== undefined && one.number !== slot).map((one) => one.number);
    expect(alsoMoved("slot", shared, slot)).toEqual([]);
    expect(alsoMoved("mode", shared, slot)).toEqual(others);
    expect(alsoMoved("everywhere", now, slot)).toEqual(others);
  });
});

describe("a plan as the page lists it", () => {
  test("one row a value, by slot, with what it was and what is planned", () => {
    const merged = applyPatch(now, [{ path: `slots[${slot}].placement.offsetPx`, value: 12 }, { path: "everywhere.trim.topLines", value: 4 }]);
    const groups = reviewGroups(now, merged, limits, []);
    expect(groups.map((group) => group.kind)).toEqual(["slot", "everywhere"]);
    expect(groups[0]?.rows).toMatchObject([{ label: "Horizontal position", unit: "px", planned: 12, range: { min: -64, max: 63, step: 1 } }]);
  });

  test("a raster is one row, however many of its figures change", () => {
    const path = `modes[${filled?.mode}].timing`;
    const merged = applyPatch(now, [{ path: `${path}.horizontal.frontPorch`, value: 40 }, { path: `${path}.horizontal.backPorch`, value: 112 }]);
    const groups = reviewGroups(now, merged, limits, []);
    expect(groups).toHaveLength(1);
    expect(groups[0]?.rows).toMatchObject([{ path, isTiming: true }]);
  });
});

test("every slot of the device has a line, and a slot whose mode changed is marked", () => {
  const reading = { content: { driver: { slug: "", version: "" }, values, unreadable: [], document: now }, activeSlot: slot, rasterOut: null, arriving: null, atMs: 0 };
  const before = applyPatch(now, [{ path: `modes[${filled?.mode}].timing.horizontal.frontPorch`, value: 39 }]);
  const lines = slotLines(reading, limits, before);
  expect(lines).toHaveLength(8);
  expect(lines.find((line) => line.number === slot)).toMatchObject({ active: true, changed: true });
});

test("a native key is named by its slot and its words", () => {
  expect(settingName("slots[4].placement.offsetPx")).toBe("Slot 4, Horizontal position");
  expect(settingName("native.fanPct", driver.definition)).toBe("Fan speed");
});
