import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";
import { allowedRasters } from "@/lib/serial/plan/allowed-rasters";
import { deviceImage, outputOf, takeStep } from "@/lib/serial/plan/device-image";
import { findRoute } from "@/lib/serial/plan/find-route";
import { rasterOfSlot } from "@/lib/serial/plan/output-raster";
import { pictureFits } from "@/lib/serial/plan/picture-fits";
import { isCheckedPlan, planChanges } from "@/lib/serial/plan/plan-changes";
import { planEdits } from "@/lib/serial/plan/plan-edits";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import type { PlanInput } from "@/lib/serial/plan/types";
import { backupOf, inputOf, onRecall, onWrite, planAcknowledged, planned, profileOf, rasterOf, television, television525 } from "./plan-fixtures";

const renamed = profileOf({ slots: [{ number: 2, name: "Arcade" }] });
const renaming = (over: Partial<PlanInput> = {}) => inputOf(onRecall, { target: { kind: "profile", document: renamed }, ...over });

describe("what keeps a plan from being made", () => {
  it("gives no plan on a stop, however much is acknowledged", () => {
    const tooTall = profileOf({ slots: [{ number: 1, placement: { heightPct: 110 } }] });
    const input = inputOf(onRecall, { target: { kind: "profile", document: tooTall } });
    const { plan, findings } = planAcknowledged(input);
    expect(findings[0]).toMatchObject({ rule: "placement.vertical", severity: "stop" });
    expect(plan).toBeNull();
  });

  it("gives no plan for a raster that the screen does not take", () => {
    const document = profileOf({ modes: [{ key: "a", timing: rasterOf(onRecall, 5) }], slots: [{ number: 1, mode: "a" }] });
    const { plan, findings } = planAcknowledged(inputOf(onRecall, { target: { kind: "profile", document } }));
    expect(findings.some(({ rule, severity }) => rule === "screen.line-rate" && severity === "stop")).toBe(true);
    expect(plan).toBeNull();
  });

  it("gives no plan while a caution is not acknowledged, and names each once", () => {
    const first = planChanges(renaming());
    expect(first.plan).toBeNull();
    expect(first.toAcknowledge.length).toBeGreaterThan(0);
    expect(new Set(first.toAcknowledge).size).toBe(first.toAcknowledge.length);
    expect(planChanges(renaming({ acknowledged: first.toAcknowledge.slice(1) })).toAcknowledge).toEqual(first.toAcknowledge.slice(0, 1));
    expect(planChanges(renaming({ acknowledged: first.toAcknowledge })).plan).not.toBeNull();
  });

  it("gives no plan where nothing changes", () => {
    const { plan, changes, unchangedCount } = planAcknowledged(renaming({ target: { kind: "profile", document: profileOf({ slots: [{ number: 2, name: "480 lines 60 Hz" }] }) } }));
    expect({ plan, changes, unchangedCount }).toEqual({ plan: null, changes: [], unchangedCount: 1 });
  });

  it("stops where what is out is not what the active slot says, since it could not be put back", () => {
    const { plan, findings } = planAcknowledged(renaming({ rasterOut: rasterOf(onRecall, 2) }));
    expect(findings.find(({ rule }) => rule === "plan.raster-not-in-effect")?.severity).toBe("stop");
    expect(plan).toBeNull();
    expect(planAcknowledged(renaming({ rasterOut: rasterOf(onRecall, 1) })).plan).not.toBeNull();
  });

  it("takes the raster without input for nothing arriving, not for another mode", () => {
    const idle = onRecall.output.idle.withoutInput;
    expect(planAcknowledged(renaming({ rasterOut: idle === "unknown" ? null : idle })).plan).not.toBeNull();
  });
});

describe("what a plan holds", () => {
  it("is made by planChanges alone: a copy of one is none", () => {
    const plan = planned(renaming());
    expect(isCheckedPlan(plan)).toBe(true);
    expect(isCheckedPlan({ ...plan })).toBe(false);
  });

  it("says what it costs: characters both ways of each request and its read-back", () => {
    const plan = planned(renaming());
    // SLOT2:NAME Arcade*XXXX, its reply SLOT2:NAME=Arcade*XXXX, the query SLOT2:NAME?*XXXX and the same reply, each with its line end.
    expect(plan.bytes).toBe(23 + 23 + 17 + 23);
    expect(plan.seconds).toBeGreaterThan((plan.bytes * 10) / 115_200);
  });

  it("names slots whose mode changes among the changed ones", () => {
    const timing = { ...rasterOf(onRecall, 1), pixelClockHz: 27_050_000 };
    const document = profileOf({ modes: [{ key: "a", timing }], slots: [{ number: 1, mode: "a" }] });
    expect(planned(inputOf(onRecall, { target: { kind: "profile", document } })).changedSlots).toEqual([1]);
  });

  it("never writes what the device cannot be asked, and lists it for the hand", () => {
    const known = backupOf(onRecall);
    const { "slots[2].placement.offsetPx": _unasked, ...values } = known.values;
    const backup = { ...known, values, unreadable: ["slots[2].placement.offsetPx"] };
    const document = profileOf({ slots: [{ number: 2, name: "Arcade", placement: { offsetPx: 3, widthPct: 88 } }] });
    const plan = planned(inputOf(onRecall, { backup, target: { kind: "profile", document } }));
    expect(plan.changes.map(({ key }) => key)).not.toContain("slots[2].placement.offsetPx");
    expect(plan.byHand).toEqual([{ key: "slots[2].placement.offsetPx", label: "Slot 2: Horizontal position", value: 3 }]);
  });

  it("never moves a picture outside the raster on the way, on a device that refuses that", () => {
    const backup = backupOf(onRecall, { "slots[2].placement.heightPct": 840, "slots[2].placement.offsetLines": 19, "slots[2].placement.widthPct": 960, "slots[2].placement.offsetPx": -20 });
    const document = profileOf({ slots: [{ number: 2, placement: { heightPct: 96, offsetLines: -4, widthPct: 100, offsetPx: 0 } }] });
    const plan = planned(inputOf(onRecall, { backup, target: { kind: "profile", document } }));
    const image = deviceImage(compiledDriver(onRecall), { values: backup.values, activeSlot: 1 });
    for (const step of plan.steps) {
      takeStep(image, step);
      expect(pictureFits(image.driver, image.values, 2)).toBe(true);
    }
  });
});

describe("the hash", () => {
  it("is the same for the same input, whatever object or order it comes in", () => {
    const { hash } = planned(renaming());
    const again = JSON.parse(JSON.stringify(planned(renaming()).input)) as PlanInput;
    expect(planChanges({ ...again, acknowledged: [...again.acknowledged].reverse() }).plan?.hash).toBe(hash);
    expect(hash).toMatch(/^[0-9a-f]{64}$/u);
  });

  it("differs with every input", () => {
    const base = planned(renaming());
    const others: Partial<PlanInput>[] = [
      { screen: { ...television, name: "Another" } }, { screen: television525 }, { activeSlot: 2 }, { leftOut: [8] },
      { source: { activePx: 720, activeLines: 480, interlaced: false, fieldRateHz: 59.94 } },
      { backup: backupOf(onRecall, { "native.fanPct": 45 }) },
      { driver: { ...onRecall, version: "1.0.1" } },
      { acknowledged: [...base.input.acknowledged, "screen.idle device.idle.nothing"] },
      { target: { kind: "profile", document: profileOf({ slots: [{ number: 2, name: "Arcade B" }] }) } },
    ];
    const hashes = others.map((over) => {
      const input = { ...renaming(over) };
      return over.acknowledged ? planChanges(input).plan?.hash : planned(input).hash;
    });
    expect(new Set([base.hash, ...hashes]).size).toBe(others.length + 1);
  }, 30_000);
});

describe("a restore", () => {
  it("writes modes by number, empty ones and native settings too", () => {
    const content = backupOf(onRecall, { "native.fanPct": 60, "modes[20].timing.vertical.active": 240, "slots[3].name": "Old" });
    const plan = planned(inputOf(onRecall, { target: { kind: "restore", content } }));
    expect(plan.changes.map(({ key }) => key).sort()).toEqual(["modes[20].timing.vertical.active", "native.fanPct", "slots[3].name"]);
    expect(plan.changes.find(({ key }) => key === "native.fanPct")?.neutralPath).toBeUndefined();
  });

  it("leaves a left-out slot as it is, and what it shares", () => {
    const content = backupOf(onRecall, {
      "slots[1].name": "Other", "modes[1].timing.pixelClockHz": 27_050, "everywhere.trim.leftPx": 4, "slots[3].name": "Old",
    });
    const input = inputOf(onRecall, { target: { kind: "restore", content }, leftOut: [1] });
    const { plan, findings } = planAcknowledged(input);
    expect(plan?.changes.map(({ key }) => key)).toEqual(["slots[3].name"]);
    expect(findings.find(({ rule }) => rule === "plan.shared-with-left-out")?.sentence).toBe("2 values stay as now, since slot 1 shares them.");
  });
});

describe("settings changed by hand", () => {
  const edit = (over: Pick<Parameters<typeof planEdits>[0], "edits" | "nativeEdits">, definition: DriverDefinition = onRecall) => {
    const { target: _target, leftOut: _leftOut, ...rest } = inputOf(definition, {});
    const first = planEdits({ ...rest, ...over });
    return planEdits({ ...rest, ...over, acknowledged: first.toAcknowledge });
  };

  it("changes just these, in the mode that the slot is on", () => {
    const { plan } = edit({ edits: [{ path: "slots[2].placement.offsetLines", value: 0 }, { path: "modes[3].timing.horizontal.frontPorch", value: 20 }, { path: "modes[3].timing.horizontal.backPorch", value: 142 }] });
    expect(plan?.changes.map(({ key, planned: value }) => [key, value])).toEqual([
      ["modes[3].timing.horizontal.frontPorch", 20], ["modes[3].timing.horizontal.backPorch", 142],
    ]);
  });

  it("takes native settings along", () => {
    const { plan } = edit({ edits: [{ path: "slots[2].name", value: "Left cabinet" }], nativeEdits: [{ key: "native.fanPct", value: 55 }] });
    expect(plan?.changes.map(({ key }) => key).sort()).toEqual(["native.fanPct", "slots[2].name"]);
  });
});

describe("the way back", () => {
  const figure = (min: number, max: number) => fc.integer({ min, max });

  it("is as safe as the way there, from every state on it (property)", () => {
    const driver = compiledDriver(onWrite);
    const { values: before } = backupOf(onWrite);
    fc.assert(
      fc.property(figure(20, 56), figure(2, 10), figure(536, 544), figure(-3, 3), (front, vFront, clockSteps, taller) => {
        const at = "modes[1].timing";
        const wanted = {
          [`${at}.pixelClockHz`]: clockSteps * 50,
          [`${at}.horizontal.frontPorch`]: front, [`${at}.horizontal.backPorch`]: 152 - front,
          [`${at}.vertical.active`]: 240 + taller, [`${at}.vertical.frontPorch`]: vFront, [`${at}.vertical.backPorch`]: 19 - vFront - taller,
        };
        const image = deviceImage(driver, { values: before, activeSlot: 1 });
        const after = rasterOfSlot(driver, new Map(Object.entries({ ...before, ...wanted })), 1);
        const allowed = allowedRasters({ screen: television, before: outputOf(image), after });
        const route = findRoute(image, { values: wanted, activeSlot: 1, allowed }, [1, 3]);
        fc.pre(route !== null);
        const old = Object.fromEntries(Object.keys(wanted).map((key) => [key, before[key] ?? 0]));
        for (const step of route?.steps ?? []) {
          expect(allowed(takeStep(image, step).rasterAfter)).toBe(true);
          const back = findRoute(image, { values: old, activeSlot: 1, allowed }, [1, 3]);
          expect(back?.steps.every(({ rasterAfter }) => allowed(rasterAfter))).toBe(true);
        }
        expect(Object.fromEntries(Object.keys(wanted).map((key) => [key, image.values.get(key)]))).toEqual(wanted);
      }),
      { numRuns: 25 },
    );
  }, 30_000);
});
