import { describe, expect, it } from "vitest";
import { fieldRateHz, lineRateHz } from "@/lib/timing/rates";
import type { RasterTiming } from "@/lib/timing/raster";
import { inSpan } from "@/lib/timing/span";
import type { CompiledDriver, CompiledSetting } from "@/lib/serial/driver/compiled";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import type { AllowedRasters } from "@/lib/serial/plan/allowed-rasters";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";
import { deviceImage } from "@/lib/serial/plan/device-image";
import { findRoute } from "@/lib/serial/plan/find-route";
import type { CheckedPlan, PlanInput } from "@/lib/serial/plan/types";
import {
  backupOf, inputOf, onRecall, onWrite, planAcknowledged, planned, profileOf, rasterOf, rastersNotAllowed, television, television525, withMute,
} from "./plan-fixtures";

/** 240 lines at 60 Hz with the picture moved right: front porch to back porch. CTA-861 VIC 8 has 38 and 114. */
function movedRight(timing: RasterTiming, px: number): RasterTiming {
  const { frontPorch, backPorch } = timing.horizontal;
  return { ...timing, horizontal: { ...timing.horizontal, frontPorch: frontPorch - px, backPorch: backPorch + px } };
}

function inEveryStep(plan: CheckedPlan): void {
  expect(rastersNotAllowed(plan)).toEqual([]);
  // Against the screen's own figures, not only by the rule that the plan used.
  for (const { rasterAfter } of plan.steps) {
    if (rasterAfter === null || plan.input.screen === "accepted-unknown") continue;
    const fits = plan.input.screen.bands.some((band) => inSpan(lineRateHz(rasterAfter), band.lineRateHz) && inSpan(fieldRateHz(rasterAfter), band.fieldRateHz));
    expect(fits).toBe(true);
  }
}

const writesOf = (plan: CheckedPlan) => plan.steps.flatMap((step) => (step.kind === "write" ? step.writes : []));

/** One profile whose slot 1 gets this timing in its mode. */
function profileWithTiming(timing: RasterTiming, slots: readonly number[] = [1]) {
  return profileOf({ modes: [{ key: "a", timing }], slots: slots.map((number) => ({ number, mode: "a" })) });
}

describe("way 1: single writes in an order that is safe", () => {
  it("writes each changed setting once, and nothing else", () => {
    const document = profileOf({ slots: [{ number: 2, name: "Arcade", placement: { offsetPx: 12, widthPct: 88 } }] });
    const plan = planned(inputOf(onRecall, { target: { kind: "profile", document } }));
    expect(plan.way).toBe(1);
    expect(writesOf(plan).map(({ key }) => key).sort()).toEqual(["slots[2].name", "slots[2].placement.offsetPx", "slots[2].placement.widthPct"]);
    expect(plan.steps.every((step) => step.kind === "write")).toBe(true);
  });

  it("moves a porch step of an active mode as one unit, both numbers next to each other", () => {
    const timing = movedRight(rasterOf(onWrite, 1), 4);
    const plan = planned(inputOf(onWrite, { target: { kind: "profile", document: profileWithTiming(timing) } }));
    expect(plan.way).toBe(1);
    expect(writesOf(plan)).toEqual([
      { key: "modes[1].timing.horizontal.frontPorch", value: 34 },
      { key: "modes[1].timing.horizontal.backPorch", value: 118 },
    ]);
    inEveryStep(plan);
  });

  it("splits a porch step whose numbers have no order in one", () => {
    // 30 clocks of 1 716 are 1.7 %, and the 525-line band ends 1 % from 15 734 Hz: no single write of 30 fits.
    const timing = movedRight(rasterOf(onWrite, 1), 30);
    const plan = planned(inputOf(onWrite, { screen: television525, target: { kind: "profile", document: profileWithTiming(timing) } }));
    expect(plan.way).toBe(1);
    expect(plan.steps.length).toBeGreaterThan(2);
    expect(writesOf(plan).at(-1)?.value).toBe(plan.changes.find(({ key }) => key === writesOf(plan).at(-1)?.key)?.planned);
    inEveryStep(plan);
  });

  it("writes a mode that is not out first, then points the active slot to it in one write", () => {
    const document = profileOf({ modes: [{ key: "a", timing: rasterOf(onWrite, 3) }], slots: [{ number: 1, mode: "a" }] });
    const plan = planned(inputOf(onWrite, { target: { kind: "profile", document } }));
    expect(writesOf(plan)).toEqual([{ key: "slots[1].mode", value: 3 }]);
    inEveryStep(plan);
  });
});

describe("way 2: one recall or one block", () => {
  it("ends a changed active mode in one recall on a device whose timing waits for it", () => {
    const timing = { ...movedRight(rasterOf(onRecall, 1), 30), pixelClockHz: 27_050_000 };
    const plan = planned(inputOf(onRecall, { target: { kind: "profile", document: profileWithTiming(timing) } }));
    expect(plan.way).toBe(2);
    expect(plan.steps.filter((step) => step.kind === "recall")).toEqual([{ kind: "recall", slot: 1, why: "take-effect", rasterAfter: timing }]);
    expect(plan.steps.at(-1)?.kind).toBe("recall");
    expect(plan.steps.slice(0, -1).every((step) => JSON.stringify(step.rasterAfter) === JSON.stringify(plan.rasterBefore))).toBe(true);
  });

  it("recalls nothing where the active mode does not change", () => {
    const timing = movedRight(rasterOf(onRecall, 3), 4);
    const plan = planned(inputOf(onRecall, { target: { kind: "profile", document: profileWithTiming(timing, [3]) } }));
    expect(plan.steps.some((step) => step.kind === "recall")).toBe(false);
  });
});

/** A device that takes a mode's timing, and a slot's settings, in one block each: the fixture's settings on a block protocol. */
function inBlocks(definition: DriverDefinition): CompiledDriver {
  const driver = compiledDriver(definition);
  const settings = driver.settings.map((setting): CompiledSetting => {
    const field = { block: setting.scope, byteOffset: 0, bytes: 2, signed: true, encoding: "integer" } as const;
    return { ...setting, source: { ...setting.source, wire: { kind: "packet", field, readable: true, writable: true } } };
  });
  return { ...driver, definition: { ...definition, timingTakesEffect: "block" }, settings };
}

describe("a device that takes timing in blocks", () => {
  const driver = inBlocks(onWrite);
  const { values } = backupOf(onWrite);
  const changed = { "modes[1].timing.pixelClockHz": 13_500, "modes[1].timing.horizontal.active": 720, "modes[1].timing.horizontal.frontPorch": 19, "modes[1].timing.horizontal.sync": 62, "modes[1].timing.horizontal.backPorch": 57 };

  it("brings a mode over in one request, written whole, with nothing out between", () => {
    const route = findRoute(deviceImage(driver, { values, activeSlot: 1 }), { values: changed, activeSlot: 1, allowed: onlyBeforeAndAfter }, [1, 3, 5]);
    expect(route?.way).toBe(2);
    expect(route?.steps).toHaveLength(1);
    const [step] = route?.steps ?? [];
    expect(step?.kind === "write" && step.writes.length).toBe(driver.settings.filter(({ number, scope }) => scope === "mode" && number === 1).length);
    expect(step?.rasterAfter).toEqual(halved);
  });

  const onlyBeforeAndAfter: AllowedRasters = (raster) => [rasterOf(onWrite, 1), halved].some((one) => JSON.stringify(one) === JSON.stringify(raster));
});

/** Every number of the raster changes: 240p60 at 27 MHz to its half, 13.5 MHz with half of every horizontal figure (BT.601 sampling). */
const halved: RasterTiming = {
  pixelClockHz: 13_500_000, interlaced: false,
  horizontal: { active: 720, frontPorch: 19, sync: 62, backPorch: 57, polarity: "negative" },
  vertical: { active: 240, frontPorch: 4, sync: 3, backPorch: 15, polarity: "negative" },
};

/** Slot 1 and 5 share mode 1; slot 5 is the other digital slot. */
const shared = backupOf(onWrite, { "slots[5].mode": 1 });

describe("ways 3 to 5, where no order of single writes is safe", () => {
  const target = { kind: "profile", document: profileWithTiming(halved, [1, 5]) } as const;

  it("puts another slot on the same input on meanwhile, and the first again at the end", () => {
    const plan = planned(inputOf(onWrite, { backup: shared, screen: television, target }));
    expect(plan.way).toBe(3);
    expect(plan.steps[0]).toMatchObject({ kind: "recall", slot: 2, why: "step-aside" });
    expect(plan.steps.at(-1)).toMatchObject({ kind: "recall", slot: 1, why: "return", rasterAfter: halved });
    inEveryStep(plan);
  });

  it("takes no slot on another input, and none whose mode the screen does not take", () => {
    const backup = backupOf(onWrite, {
      "slots[5].mode": 1, "slots[2].input": "A1", "slots[3].input": "A1", "slots[4].mode": 5,
    });
    const plan = planned(inputOf(onWrite, { backup, target }));
    expect(plan.way).toBe(4);
  });

  const alone: Partial<PlanInput> = {
    backup: backupOf(onWrite, { "slots[2].mode": 0, "slots[3].mode": 0, "slots[4].mode": 0, "slots[5].mode": 1 }),
    target,
  };

  it("writes a free mode and points every planned slot there, where no slot can stand in", () => {
    const plan = planned(inputOf(onWrite, alone));
    expect(plan.way).toBe(4);
    expect(writesOf(plan).filter(({ key }) => key.endsWith(".mode"))).toEqual([
      { key: "slots[5].mode", value: 2 }, { key: "slots[1].mode", value: 2 },
    ]);
    expect(writesOf(plan).some(({ key }) => key.startsWith("modes[1]."))).toBe(false);
    inEveryStep(plan);
    const { merged, findings } = planAcknowledged(inputOf(onWrite, alone));
    expect(merged.slots?.filter((slot) => slot.mode === "2").map((slot) => slot.number)).toEqual([1, 5]);
    expect(merged.modes?.find((mode) => mode.key === "2")?.timing).toMatchObject(halved);
    expect(merged.modes?.find((mode) => mode.key === "1")?.timing).toMatchObject(rasterOf(onWrite, 1));
    expect(findings.find(({ rule }) => rule === "plan.free-mode")?.severity).toBe("note");
  });

  /** A restore of the same values writes modes by number. */
  const restore = (definition: typeof onWrite): Partial<PlanInput> => {
    const backup = backupOf(definition, { "slots[2].mode": 0, "slots[3].mode": 0, "slots[4].mode": 0, "slots[5].mode": 1 });
    const content = backupOf(definition, {
      ...backup.values, "modes[1].timing.pixelClockHz": 13_500, "modes[1].timing.horizontal.active": 720,
      "modes[1].timing.horizontal.frontPorch": 19, "modes[1].timing.horizontal.sync": 62, "modes[1].timing.horizontal.backPorch": 57,
    });
    return { backup, target: { kind: "restore", content } };
  };

  it("never takes a free mode for a restore, and says what would help instead", () => {
    const { plan, findings } = planAcknowledged(inputOf(onWrite, restore(onWrite)));
    expect(plan).toBeNull();
    const stop = findings.find(({ rule }) => rule === "plan.no-safe-order");
    expect(stop?.severity).toBe("stop");
    expect(stop?.detail).toContain("Make another slot active first");
    expect(stop?.detail).not.toContain("mode free");
  });

  it("mutes the output as the last way, where the device can", () => {
    const plan = planned(inputOf(withMute, restore(withMute)));
    expect(plan.way).toBe(5);
    expect(plan.steps[0]).toEqual({ kind: "mute", on: true, rasterAfter: null });
    expect(plan.steps.at(-1)).toMatchObject({ kind: "mute", on: false });
    expect(plan.steps.slice(0, -1).every((step) => step.rasterAfter === null)).toBe(true);
    inEveryStep(plan);
  });
});

describe("an unknown screen", () => {
  it("allows rates between those before and after, ±1 %, and no others", () => {
    const near = { ...rasterOf(onWrite, 1), pixelClockHz: 26_850_000 };
    const plan = planned(inputOf(onWrite, { screen: "accepted-unknown", target: { kind: "profile", document: profileWithTiming(near) } }));
    expect(plan.way).toBe(1);
    const lone = backupOf(onWrite, { "slots[2].mode": 0, "slots[3].mode": 0, "slots[4].mode": 0, "slots[5].mode": 0 });
    const far = planned(inputOf(onWrite, { backup: lone, screen: "accepted-unknown", target: { kind: "profile", document: profileWithTiming(halved) } }));
    expect(far.way).toBe(4);
    expect(rastersNotAllowed(far)).toEqual([]);
  });
});
