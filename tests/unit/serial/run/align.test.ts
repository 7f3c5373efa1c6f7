import { describe, expect, it } from "vitest";
import { createAlignment } from "@/lib/serial/run/create-run";
import { connect } from "@/tests/unit/serial/simulated-rig";
import { align, aligning, alignRig, DEVICES, nativeOf, offset, porches, type AlignRig } from "./align-rig";
import { settle } from "./run-rig";

const devices = Object.entries(DEVICES).map(([name, definition]) => ({ name, definition }));
const requests = ({ journal }: AlignRig, outcome: string) =>
  journal.entries.flatMap((entry) => (entry.kind === "request" && entry.outcome === outcome ? [entry.request] : []));

describe.each(devices)("live alignment on $name", ({ definition }) => {
  it("begins as every run does, with nothing changed, and then is tried", async () => {
    const rig = await aligning(definition);
    expect(rig.run.view).toMatchObject({ state: "trying", notLookedAt: [], commitMayHaveLeft: false, onlyThisPagePutsBack: rig.driver.definition.memory.deviceTimer === undefined });
    expect(rig.device.counts).toMatchObject({ writes: 0, recalls: 0, commits: 0 });
    expect(await settle(rig.clock, rig.run.keep())).toEqual({ ok: false, error: "nothing-new" });
    await rig.clock.advance(13_000);
    expect(rig.run.view.state).toBe("put-back");
    expect(rig.device.counts).toMatchObject({ writes: 0, recalls: 0, commits: 0 });
    expect(rig.device.timerArmed).toBe(false);
  });

  it("moves a slot and its mode's porches step by step, reads each back, and keeps what it came to", async () => {
    const rig = await aligning(definition);
    for (const target of [offset(2), porches(-4), offset(4)]) expect(await settle(rig.clock, align(rig, target))).toEqual({ ok: true, value: undefined });
    const reached = { ...nativeOf(rig, porches(-4)), ...nativeOf(rig, offset(4)) };
    expect(rig.device.working).toMatchObject(reached);
    expect(rig.run.values).toMatchObject(reached);
    expect(rig.run.view.notLookedAt).toEqual([]);
    await settle(rig.clock, rig.run.keep());
    const proofIsAsked = definition.status.committed !== undefined || !definition.memory.volatileWrites;
    expect(rig.run.view.state).toBe(proofIsAsked ? "kept" : "unconfirmed");
    expect(rig.device.stored).toMatchObject(reached);
    expect(rig.notAllowed).toEqual([]);
  });

  it("puts all of it back at the end of the countdown, which every step begins again", async () => {
    const rig = await aligning(definition);
    await rig.clock.advance(8_000);
    await settle(rig.clock, align(rig, porches(6)));
    await rig.clock.advance(8_000);
    expect(rig.run.view.state).toBe("trying");
    expect(rig.device.timerArmed).toBe(definition.memory.deviceTimer !== undefined);
    await rig.clock.advance(13_000);
    expect(rig.run.view.state).toBe("put-back");
    expect(rig.device.working).toMatchObject(nativeOf(rig, porches(0)));
    expect(rig.device.stored).toMatchObject(nativeOf(rig, porches(0)));
    expect(rig.notAllowed).toEqual([]);
  });

  it("journals what counts as new before the first byte of a step, and each request before it leaves and after", async () => {
    const rig = await aligning(definition);
    const from = rig.journal.entries.length;
    const seen: number[] = [];
    rig.device.onRaster(() => seen.push(rig.journal.entries.length));
    await settle(rig.clock, align(rig, porches(2)));
    const told = rig.journal.entries.slice(from);
    const aim = told.findIndex(({ kind }) => kind === "align");
    expect(told[aim]).toMatchObject({ values: Object.entries(nativeOf(rig, porches(2))).map(([key, value]) => ({ key, value })) });
    const writes = told.flatMap((entry, at) => (entry.kind === "request" && entry.request === "write" ? [{ at, entry }] : []));
    expect(writes.length).toBeGreaterThan(0);
    expect(writes.every(({ at }) => at > aim)).toBe(true);
    expect(writes.map(({ entry }) => entry.outcome)).toEqual(writes.map((_, at) => (at % 2 === 0 ? "leaving" : "done")));
    // The raster moved only after that: with the writes, or with the recall behind them.
    expect(Math.min(...seen)).toBeGreaterThan(from + aim + 1);
  });

  it("sends the newest target alone, however many come while a step is under way", async () => {
    const rig = await aligning(definition);
    const { writes } = rig.device.counts;
    const keys = Array.from({ length: 10 }, (_, at) => align(rig, offset(2 * (at + 1))));
    await settle(rig.clock, Promise.all(keys));
    expect(rig.device.working).toMatchObject(nativeOf(rig, offset(20)));
    expect(requests(rig, "leaving").filter((one) => one === "write")).toHaveLength(2);
    expect(rig.device.counts.writes).toBeGreaterThan(writes);
    const values = rig.journal.entries.flatMap((entry) => (entry.kind === "align" ? entry.values.map(({ value }) => value) : []));
    expect(values).toEqual([nativeOf(rig, offset(2)), nativeOf(rig, offset(20))].flatMap((one) => Object.values(one)));
  });

  it("loses no setting that waits when the next target names another", async () => {
    const rig = await aligning(definition);
    const width = [{ path: "slots[1].placement.widthPct", value: 96 }];
    await settle(rig.clock, Promise.all([align(rig, offset(2)), align(rig, offset(6)), align(rig, width)]));
    expect(rig.device.working).toMatchObject({ ...nativeOf(rig, offset(6)), ...nativeOf(rig, width) });
    expect(rig.journal.entries.filter(({ kind }) => kind === "align")).toHaveLength(2);
  });

  it("is not cut in a porch step by the next target, and splits a large one to fit", async () => {
    const rig = await aligning(definition);
    const sums: number[] = [];
    const sum = () => Number(rig.device.working["modes[1].timing.horizontal.frontPorch"]) + Number(rig.device.working["modes[1].timing.horizontal.backPorch"]);
    const append = rig.journal.append.bind(rig.journal);
    Object.assign(rig.journal, { append: (entry: Parameters<typeof append>[0]) => {
      if (entry.kind === "align") sums.push(sum());
      return append(entry);
    } });
    // 30 clocks of 1716 are more than a television's line rate spans, both ways: 15.469 to 15.892 kHz at 27 MHz is 1699 to 1745.
    await settle(rig.clock, Promise.all([align(rig, porches(-30)), align(rig, porches(10)), align(rig, porches(20))]));
    expect(sums).toEqual([152, 152]);
    expect(sum()).toBe(152);
    expect(rig.device.working).toMatchObject(nativeOf(rig, porches(20)));
    expect(rig.notAllowed).toEqual([]);
  });

  it("sends nothing that a check stops, that changes a total, or that is no alignment", async () => {
    const rig = await aligning(definition);
    const before = { ...rig.device.counts };
    const code = async (target: Parameters<typeof align>[1]) => {
      const result = await settle(rig.clock, align(rig, target));
      return result.ok ? "taken" : result.error.code;
    };
    expect(await code(porches(60))).toBe("stopped");
    expect(await code(porches(2).slice(0, 1))).toBe("totals-change");
    expect(await code([{ path: "modes[1].timing.pixelClockHz", value: 27_050_000 }])).toBe("not-alignable");
    expect(await code([{ path: "slots[9].placement.offsetPx", value: 1 }])).toBe("not-alignable");
    expect(await code([{ path: "slots[1].name", value: "x" }])).toBe("not-alignable");
    expect(await code(offset(0))).toBe("taken");
    expect(rig.device.counts).toMatchObject({ writes: before.writes, recalls: before.recalls });
    expect(rig.run.view.state).toBe("trying");
  });

  it("puts back when the device refuses a step, or holds another value than it took", async () => {
    for (const kind of ["refuse", "store-other"] as const) {
      const rig = await aligning(definition);
      await settle(rig.clock, align(rig, offset(2)));
      let once = true;
      rig.device.setFault((operation) => {
        if (operation.kind !== "write" || !once) return undefined;
        once = false;
        return { kind };
      });
      await settle(rig.clock, align(rig, offset(4)));
      expect(rig.run.view.state).toBe("put-back");
      expect(rig.device.working).toMatchObject(nativeOf(rig, offset(0)));
    }
  });

  it("goes back at Stop in the midst of a hold, between two requests", async () => {
    const rig = await aligning(definition);
    const stopped = new Promise<void>((resolve) => {
      const unhook = rig.run.onView(({ progress }) => {
        if (progress.done === 0) return;
        unhook();
        void rig.run.stop().then(() => resolve());
      });
    });
    const keys = [align(rig, offset(2)), align(rig, offset(8))];
    await settle(rig.clock, Promise.all([...keys, stopped]));
    expect(rig.run.view.state).toBe("put-back");
    expect(rig.journal.entries.filter(({ kind }) => kind === "align")).toHaveLength(1);
    expect(rig.device.working).toMatchObject(nativeOf(rig, offset(0)));
  });
});

describe("live alignment", () => {
  it("is refused without a stored backup, and where what is out is not what the active slot says", async () => {
    const { setup, session } = await alignRig(DEVICES.lf8);
    const basis = { ...setup.basis, backup: null };
    expect(createAlignment({ ...setup, basis, session })).toEqual({ ok: false, error: "no-backup" });
    const other = setup.basis.rasterOut && { ...setup.basis.rasterOut, pixelClockHz: 13_500_000 };
    expect(createAlignment({ ...setup, basis: { ...setup.basis, rasterOut: other }, session })).toEqual({ ok: false, error: "not-in-effect" });
  });

  it("is called off where the device is no longer as the backup has it", async () => {
    const rig = await alignRig(DEVICES.lf8);
    rig.device.operate({ kind: "write", writes: [{ key: "slots[2].placement.offsetPx", value: 5 }] });
    await settle(rig.clock, rig.run.start());
    expect(rig.run.view).toMatchObject({ state: "called-off", why: expect.stringContaining("slots[2].placement.offsetPx") as string });
    expect(rig.device.counts.writes).toBe(1);
  });

  it("asks first on a device without trial memory, since each step is stored", async () => {
    const rig = await aligning(DEVICES.ternwick);
    const told = await settle(rig.clock, rig.run.align(offset(2)));
    expect(told).toEqual({ ok: false, error: { code: "stores-at-once", findings: [] } });
    expect(rig.device.counts.writes).toBe(0);
  });

  it("belongs to a run that is tried, before its countdown ends, with nothing else under way", async () => {
    const rig = await alignRig(DEVICES.lf8);
    const code = async () => {
      const result = await rig.run.align(offset(2));
      return result.ok ? "taken" : result.error.code;
    };
    expect(await code()).toBe("wrong-state");
    await settle(rig.clock, rig.run.start());
    await settle(rig.clock, align(rig, offset(4)));
    const keeping = rig.run.keep();
    expect(await code()).toBe("busy");
    await settle(rig.clock, keeping);
    const late = await alignRig(DEVICES.lf8);
    const asleep = { ...late.clock, after: (ms: number, fire: () => void) => late.clock.after(ms === 10_000 ? 600_000 : ms, fire) };
    const run = createAlignment({ ...late.setup, clock: asleep, session: late.session });
    if (!run.ok) throw new Error(run.error);
    await settle(late.clock, run.value.start());
    await late.clock.advance(10_001);
    expect(await run.value.align(offset(2))).toMatchObject({ ok: false, error: { code: "too-late" } });
    expect(late.device.counts.writes).toBe(0);
  });

  it("names a slot that moves along beside Keep until it was looked at", async () => {
    const rig = await aligning(DEVICES.lf8);
    await settle(rig.clock, align(rig, [{ path: "everywhere.trim.leftPx", value: 4 }]));
    expect(rig.run.view.notLookedAt).toEqual([2]);
    await settle(rig.clock, rig.run.look(2));
    expect(rig.run.view.notLookedAt).toEqual([]);
    await settle(rig.clock, align(rig, [{ path: "everywhere.trim.leftPx", value: 6 }]));
    expect(rig.run.view.notLookedAt).toEqual([1]);
  });

  it("makes the timing of a step take effect by one recall, where it does so on recall", async () => {
    const rig = await aligning(DEVICES.lf8);
    await settle(rig.clock, align(rig, porches(4)));
    expect(rig.device.counts).toMatchObject({ writes: 2, recalls: 1 });
    await settle(rig.clock, align(rig, offset(4)));
    expect(rig.device.counts).toMatchObject({ writes: 3, recalls: 1 });
  });

  it("meets another device with a refusal", async () => {
    const rig = await aligning(DEVICES.lf8);
    rig.plug.unplug();
    await rig.clock.advance(10);
    expect(await rig.run.align(offset(2))).toMatchObject({ ok: false, error: { code: "link-lost" } });
    const twin = await connect(rig.driver, { serialNumber: "LF8-0002" }, "none");
    expect(await settle(twin.clock, rig.run.resume(twin.session))).toEqual({ ok: false, error: "other-device" });
  });
});
