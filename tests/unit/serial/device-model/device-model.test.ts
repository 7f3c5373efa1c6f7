import { describe, expect, it } from "vitest";
import { createVirtualClock } from "@/lib/serial/clock/virtual-clock";
import type { ActionName } from "@/lib/serial/driver/definition";
import type { NativeKey, NativeValue } from "@/lib/serial/native";
import { createDeviceModel, type DeviceModelOptions } from "@/lib/serial/simulator/device-model";
import { modeNameOf } from "./mode-name-of";
import { lf8 } from "@/tests/unit/serial/simulated-rig";

function device(options: Omit<DeviceModelOptions, "clock"> = {}) {
  const clock = createVirtualClock();
  const model = createDeviceModel(lf8, { clock, ...options });
  const rasters: string[] = [];
  model.onRaster((raster, cause) => rasters.push(`${cause}: ${modeNameOf(raster)}`));
  const write = (key: NativeKey, value: NativeValue) => model.operate({ kind: "write", writes: [{ key, value }] });
  const act = (name: ActionName, fields: Record<string, number> = {}) => model.operate({ kind: "action", name, fields });
  return { clock, model, rasters, write, act };
}

const FAN = "native.fanPct";

describe("memory of the simulated device", () => {
  it("holds a write until the power goes, and a commit for good", () => {
    const { model, write, act } = device();
    write(FAN, 60);
    expect([model.working[FAN], model.stored[FAN], model.committed]).toEqual([60, 40, false]);
    model.powerCycle();
    expect([model.working[FAN], model.committed, model.bootCount]).toEqual([40, true, 2]);
    write(FAN, 60);
    act("commit");
    expect([model.stored[FAN], model.committed]).toEqual([60, true]);
    model.powerCycle();
    expect(model.working[FAN]).toBe(60);
    expect(model.counts).toMatchObject({ writes: 2, commits: 1, stored: { [FAN]: 1 } });
  });

  it("refuses what is outside its range, off its step or none of its words", () => {
    const { model, write } = device();
    for (const [key, value] of [[FAN, 105], [FAN, 41], ["slots[1].syncKind", "SCART"], ["slots[1].name", "a name of more than sixteen"], ["slots[9].name", "x"], ["slots[1].placement.heightPct", 97]] as const) {
      expect(write(key, value)).toMatchObject({ kind: "refused" });
    }
    expect(model.counts).toMatchObject({ writes: 0, refusals: 6 });
  });

  // By hand: 96 % of 1440 is 1382, so 29 px are free at each side; 96 % of 240 is 230, so 5 lines are.
  it("refuses a picture that would leave its raster, and takes one that just fits", () => {
    const { write } = device();
    expect(write("slots[1].placement.offsetPx", 29).kind).toBe("values");
    expect(write("slots[1].placement.offsetPx", 30)).toMatchObject({ kind: "refused", code: -221 });
    expect(write("slots[1].placement.offsetLines", 5).kind).toBe("values");
    expect(write("slots[1].placement.heightPct", 1000)).toMatchObject({ kind: "refused", code: -221 });
    expect(write("slots[1].placement.heightPct", 800).kind).toBe("values");
  });

  it("lets go wrong what it is told to: not stored, another value, part of a commit, no commit", () => {
    const { model, write, act } = device();
    model.setFault((operation) => (operation.kind === "write" ? { kind: "store-other" } : { kind: "ignore" }));
    expect(write(FAN, 60).kind).toBe("values");
    expect(model.working[FAN]).toBe(65);
    expect(act("commit").kind).toBe("values");
    expect(model.committed).toBe(false);
    model.setFault((operation) => (operation.kind === "action" ? { kind: "torn", stored: 1 } : { kind: "ignore" }));
    write(FAN, 80);
    expect(model.working[FAN]).toBe(65);
    model.setFault(null);
    write("native.panelLight", 3);
    model.setFault(() => ({ kind: "torn", stored: 1 }));
    act("commit");
    expect([model.stored[FAN], model.stored["native.panelLight"]].filter((value) => value === 65 || value === 3)).toHaveLength(1);
    model.setFault(() => ({ kind: "busy" }));
    expect(write(FAN, 20)).toEqual({ kind: "busy" });
  });
});

describe("the raster that the simulated device puts out", () => {
  it("takes a mode's change when its slot is made active, not before", () => {
    const { model, rasters, write, act } = device();
    expect(modeNameOf(model.rasterOut)).toBe("240p60");
    write("modes[1].timing.vertical.backPorch", 16);
    write("slots[1].mode", 2);
    expect(rasters).toEqual([]);
    act("recall", { slot: 1 });
    expect(rasters).toEqual(["recall: 480i60"]);
  });

  it("refuses to make an empty slot, or one that it has not, active", () => {
    const { model, act } = device();
    expect(act("recall", { slot: 6 })).toMatchObject({ kind: "refused" });
    expect(act("recall", { slot: 0 })).toMatchObject({ kind: "refused" });
    expect(act("recall", { slot: 9 })).toMatchObject({ kind: "refused" });
    expect([model.activeSlot, model.counts.recalls]).toEqual([1, 0]);
  });

  it("is the idle one while nothing arrives and while it starts, then the switch-on slot's", async () => {
    const { clock, model, rasters, act } = device();
    model.setSource(null);
    model.setSource({ activePx: 720, activeLines: 480, interlaced: true, fieldRateHz: 59.94 });
    act("recall", { slot: 3 });
    model.restart();
    expect(model.starting).toBe(true);
    await clock.advance(1000);
    expect(rasters).toEqual(["source: 480p60", "source: 240p60", "recall: 288p50", "switch-on: 480p60", "started: 240p60"]);
    expect([model.starting, model.activeSlot, clock.pendingTimers()]).toEqual([false, 1, 0]);
  });
});

describe("the device's own timer", () => {
  it("puts back working memory, slot and raster by itself, and only once", async () => {
    const { clock, model, rasters, write, act } = device();
    act("armTimer", { seconds: 20 });
    write(FAN, 90);
    write("slots[1].mode", 3);
    act("recall", { slot: 1 });
    act("recall", { slot: 2 });
    await clock.advance(19_999);
    expect(model.timerArmed).toBe(true);
    await clock.advance(2);
    expect([model.timerArmed, model.working[FAN], model.working["slots[1].mode"], model.activeSlot, modeNameOf(model.rasterOut)]).toEqual([false, 40, 1, 1, "240p60"]);
    expect(rasters).toEqual(["recall: 288p50", "recall: 480i60", "timer: 240p60"]);
    await clock.advance(100_000);
    expect(rasters).toHaveLength(3);
  });

  it("keeps its snapshot when it is extended, takes a new one when it is armed again", async () => {
    const { clock, model, write, act } = device();
    act("armTimer", { seconds: 20 });
    write(FAN, 90);
    await clock.advance(15_000);
    expect(act("extendTimer", { seconds: 20 }).kind).toBe("values");
    await clock.advance(15_000);
    expect(model.working[FAN]).toBe(90);
    await clock.advance(6000);
    expect(model.working[FAN]).toBe(40);
    act("armTimer", { seconds: 20 });
    write(FAN, 50);
    act("armTimer", { seconds: 20 });
    await clock.advance(21_000);
    expect(model.working[FAN]).toBe(50);
  });

  it("refuses to extend, confirm or disarm what is not armed, and times out of bounds", () => {
    const { act } = device();
    for (const name of ["extendTimer", "confirmTimer", "disarmTimer"] as const) expect(act(name, { seconds: 5 })).toMatchObject({ kind: "refused" });
    expect(act("armTimer", { seconds: 0 })).toMatchObject({ kind: "refused" });
    expect(act("armTimer", { seconds: 901 })).toMatchObject({ kind: "refused" });
  });

  it("ends with a confirmation, a disarming and a restart", async () => {
    for (const end of ["confirmTimer", "disarmTimer", "restart"] as const) {
      const { clock, model, write, act } = device();
      act("armTimer", { seconds: 10 });
      write(FAN, 90);
      if (end === "restart") model.restart();
      else act(end);
      expect(model.timerArmed).toBe(false);
      await clock.advance(60_000);
      expect(model.working[FAN]).toBe(end === "restart" ? 40 : 90);
      expect(clock.pendingTimers()).toBe(0);
    }
  });
});
