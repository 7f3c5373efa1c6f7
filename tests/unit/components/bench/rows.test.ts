import { describe, expect, test } from "vitest";
import { settingRows } from "@/components/bench/setting-rows";
import { alsoMoved } from "@/lib/profile/also-moved";
import { reviewGroups } from "@/components/bench/review-rows";
import { nativeFromShown, nativeRows, shownRange, shownValue } from "@/components/bench/native-rows";
import { slotLines } from "@/components/bench/slot-lines";
import { settingName } from "@/components/bench/setting-name";
import { applyPatch } from "@/lib/profile/paths";
import { documentFromNative } from "@/lib/serial/backup/document";
import { shippedDriver } from "@/lib/serial/drivers/shipped";
import type { NativeWrite } from "@/lib/serial/native";
import { deviceLimits } from "@/lib/serial/limits";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";

const driver = compiledDriver(shippedDriver("lanternfield-lf8"));
const limits = deviceLimits(driver.definition);
const device = { limits, driver: driver.definition };
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
    const groups = reviewGroups(now, { merged, changes: [], findings: [] }, device);
    expect(groups.map((group) => group.kind)).toEqual(["slot", "everywhere"]);
    expect(groups[0]?.rows).toMatchObject([{ label: "Horizontal position", unit: "px", planned: 12, range: { min: -64, max: 63, step: 1 } }]);
  });

  test("a raster is one row, however many of its figures change", () => {
    const path = `modes[${filled?.mode}].timing`;
    const merged = applyPatch(now, [{ path: `${path}.horizontal.frontPorch`, value: 40 }, { path: `${path}.horizontal.backPorch`, value: 112 }]);
    const groups = reviewGroups(now, { merged, changes: [], findings: [] }, device);
    expect(groups).toHaveLength(1);
    expect(groups[0]?.rows).toMatchObject([{ path, isTiming: true }]);
  });
});

describe("settings that only this device has", () => {
  const rows = (edits: readonly NativeWrite[] = []) => nativeRows("everywhere", driver.definition, values, edits, slot, filled?.mode);

  test("stand beside the others with the device's range, and a change is shown as planned", () => {
    expect(rows().map(({ key, now: was, planned }) => ({ key, was, planned }))).toEqual([
      { key: "native.fanPct", was: 40, planned: 40 }, { key: "native.panelLight", was: 6, planned: 6 },
    ]);
    expect(rows([{ key: "native.fanPct", value: 55 }])[0]).toMatchObject({ now: 40, planned: 55 });
    expect(nativeRows("slot", driver.definition, values, [], slot, filled?.mode)).toEqual([]);
  });

  test("one that the device cannot be asked has no ruler: its former value is not known", () => {
    const ternwick = shippedDriver("ternwick-16");
    expect(ternwick.settings.some(({ key }) => key === "native.remoteCode")).toBe(true);
    expect(nativeRows("everywhere", ternwick, {}, [], 1, "1")).toEqual([]);
  });

  test("a scaled figure is shown in its unit and comes back to the native value of its step", () => {
    const setting = { key: "native.level", label: "Level", initial: 10, wire: driver.definition.settings[0]!.wire, value: { type: "integer" as const, min: 0, max: 40, step: 2, scale: 0.5, offset: -5, unit: "dB" } };
    expect(shownRange(setting)).toEqual({ min: -5, max: 15, step: 1, unit: "dB" });
    expect(shownValue(setting, 14)).toBe(2);
    expect(nativeFromShown(setting, 2.4)).toBe(14);
  });

  test("are listed in a plan as they are on the rulers", () => {
    const groups = reviewGroups(now, { merged: now, findings: [], changes: [{ key: "native.fanPct", was: 40, planned: 55 }] }, device);
    expect(groups).toMatchObject([{ kind: "everywhere", rows: [{ label: "Fan speed", unit: "%", now: 40, planned: 55, range: { min: 20, max: 100, step: 5 } }] }]);
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
