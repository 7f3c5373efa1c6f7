import { describe, expect, it } from "vitest";
import { createRun } from "@/lib/serial/run/create-run";
import { profileOf } from "@/tests/unit/serial/plan/plan-fixtures";
import { formerValues, newValues, requestsOf, runRig, settle, statesOf, target, trying } from "./run-rig";

describe("a run that is kept", () => {
  it("makes exactly the plan's writes, read-backs and recalls, the whole reads of the run and one commit", async () => {
    const rig = await runRig({ target });
    const before = rig.device.counts;
    await trying(rig);
    expect(rig.device.stored).toMatchObject(formerValues(rig));
    await settle(rig.clock, rig.run.keep());
    expect(rig.run.view.state).toBe("kept");
    const after = rig.device.counts;
    const writes = rig.plan.steps.filter(({ kind }) => kind === "write").length;
    const keys = rig.driver.settings.length;
    // Whole reads: at the start, at the end of writing, before the commit, and the proof after it.
    expect({
      writes: after.writes - before.writes, recalls: after.recalls - before.recalls, commits: after.commits - before.commits,
      refusals: after.refusals - before.refusals, reads: after.reads - before.reads,
    }).toEqual({ writes: rig.plan.changes.length, recalls: 1, commits: 1, refusals: 0, reads: writes + 4 * keys });
    expect(rig.device.stored).toMatchObject(newValues(rig));
    expect(rig.device.timerArmed).toBe(false);
    expect(rig.notAllowed).toEqual([]);
    expect(statesOf(rig)).toEqual(["writing", "trying", "keeping", "kept"]);
  });

  it("needs n writes for n single settings outside the active mode, and no recall", async () => {
    const slots = [{ number: 2, name: "Right" }, { number: 3, name: "Left", colour: { brightnessPct: 90 } }];
    const rig = await runRig({ target: profileOf({ slots }) });
    const before = rig.device.counts;
    await trying(rig);
    await settle(rig.clock, rig.run.keep());
    const { writes, recalls } = rig.device.counts;
    expect({ writes: writes - before.writes, recalls: recalls - before.recalls }).toEqual({ writes: 3, recalls: 0 });
  });

  it("journals each request before its bytes leave, and again with its outcome", async () => {
    const rig = await trying(await runRig({ target }));
    const seen = rig.journal.entries.filter((entry) => entry.kind === "request");
    for (const number of new Set(seen.map((entry) => entry.number))) {
      expect(seen.filter((entry) => entry.number === number).map((entry) => entry.outcome)).toEqual(["leaving", "done"]);
    }
    // What a recall puts out is checked with every write in place: the device timer is asked first whether it let them stand.
    const steps = rig.plan.steps.flatMap(({ kind }) => (kind === "recall" ? ["extend", kind] : [kind]));
    expect(requestsOf(rig, "done")).toEqual(["arm", ...steps, "extend"]);
  });

  it("makes no slot active over writes that the device timer may have taken back in part", async () => {
    const rig = await runRig({ target });
    expect(rig.plan.steps.some(({ kind }) => kind === "recall")).toBe(true);
    const { recalls } = rig.device.counts;
    rig.device.setFault((operation) => (operation.kind === "action" && operation.name === "extendTimer" ? { kind: "refuse" } : undefined));
    await settle(rig.clock, rig.run.start());
    expect(rig.device.counts.recalls).toBe(recalls);
    expect(rig.run.view.state).not.toBe("trying");
    expect(rig.notAllowed).toEqual([]);
  });

  it("leaves no timer and no listener behind", async () => {
    const rig = await trying(await runRig({ target }));
    await settle(rig.clock, rig.run.keep());
    await rig.clock.run(rig.session.close());
    expect(rig.clock.pendingTimers()).toBe(0);
  });
});

describe("rule 1: ready", () => {
  it("writes nothing before the start, and takes no plan that was not made here", async () => {
    const rig = await runRig({ target });
    expect({ state: rig.run.view.state, writes: rig.device.counts.writes }).toEqual({ state: "ready", writes: 0 });
    const { plan, journal, clock, session, backup } = rig;
    expect(() => createRun({ plan: { ...plan }, journal, clock, session, identity: backup.identity })).toThrow("planChanges");
    expect(() => createRun({ plan, journal, clock, session, identity: backup.identity, countdownSeconds: 9 })).toThrow(RangeError);
  });

  it("is called off where the device is no longer as the backup has it", async () => {
    const rig = await runRig({ target });
    rig.device.operate({ kind: "write", writes: [{ key: "native.fanPct", value: 60 }] });
    await settle(rig.clock, rig.run.start());
    expect(rig.run.view).toMatchObject({ state: "called-off", why: expect.stringContaining("native.fanPct") as string });
    expect(requestsOf(rig, "leaving")).toEqual([]);
  });

  it("is called off where another slot is active", async () => {
    const rig = await runRig({ target });
    rig.device.operate({ kind: "action", name: "recall", fields: { slot: 2 } });
    await settle(rig.clock, rig.run.start());
    expect(rig.run.view).toMatchObject({ state: "called-off", why: "Slot 2 is active; the plan was made with slot 1 active." });
  });

  it("is called off where another format arrives than the plan was checked with", async () => {
    const source = { activePx: 720, activeLines: 480, interlaced: false, fieldRateHz: 59.94 };
    const rig = await runRig({ target, source, device: { source } });
    rig.device.setSource({ ...source, activeLines: 576, fieldRateHz: 50 });
    await settle(rig.clock, rig.run.start());
    expect(rig.run.view.state).toBe("called-off");
    expect(rig.run.view.why).toContain("720 × 576");
  });
});

describe("rule 2: writing", () => {
  it("puts back when the device refuses a value", async () => {
    const rig = await runRig({ target });
    rig.device.setFault((operation) => (operation.kind === "write" && operation.writes[0]?.key === "modes[1].timing.horizontal.backPorch" ? { kind: "refuse" } : undefined));
    await settle(rig.clock, rig.run.start());
    expect(rig.run.view.state).toBe("put-back");
    expect(rig.device.working).toMatchObject(formerValues(rig));
    expect(rig.device.timerArmed).toBe(false);
  });

  it("puts back when another value is read back than was written", async () => {
    const rig = await runRig({ target });
    let other = true;
    rig.device.setFault((operation) => {
      if (operation.kind !== "write" || !other) return undefined;
      other = false;
      return { kind: "store-other" };
    });
    await settle(rig.clock, rig.run.start());
    expect(rig.run.view.state).toBe("put-back");
    expect(rig.device.working).toMatchObject(formerValues(rig));
    expect(requestsOf(rig, "mismatch")).toEqual(["write"]);
  });

  it("takes a lost reply for unknown: reads back, and goes on where the value stands", async () => {
    const rig = await runRig({ target });
    let lost = true;
    rig.device.setFault((operation) => {
      if (operation.kind !== "write" || !lost) return undefined;
      lost = false;
      return { kind: "silent" };
    });
    const { writes } = rig.device.counts;
    await trying(rig);
    expect(rig.device.counts.writes - writes).toBe(rig.plan.changes.length);
  });

  it("never recalls twice for a lost reply", async () => {
    const rig = await runRig({ target });
    rig.device.setFault((operation) => (operation.kind === "action" && operation.name === "recall" ? { kind: "silent" } : undefined));
    await trying(rig);
    expect(rig.device.counts.recalls).toBe(1);
  });

  it("goes back at Stop, between two requests", async () => {
    const rig = await runRig({ target });
    const started = rig.run.start();
    const stopped = new Promise<void>((resolve) => {
      rig.run.onView((view) => {
        if (view.state === "writing" && view.progress.done === 2) void rig.run.stop().then(() => resolve());
      });
    });
    await settle(rig.clock, Promise.all([started, stopped]));
    expect(rig.run.view.state).toBe("put-back");
    expect(rig.device.working).toMatchObject(formerValues(rig));
    expect(rig.device.counts.recalls).toBe(0);
  });

  it("sends nothing where the journal cannot be kept", async () => {
    const rig = await runRig({ target });
    const run = createRun({
      plan: rig.plan, clock: rig.clock, session: rig.session, identity: rig.backup.identity,
      journal: { append: (entry) => (entry.kind === "request" ? Promise.reject(new Error("storage is full")) : Promise.resolve()), load: () => Promise.resolve([]) },
    });
    await settle(rig.clock, run.start());
    expect(run.view).toMatchObject({ link: "lost", why: "The journal cannot be written: storage is full" });
    expect(rig.device.counts.writes).toBe(0);
    expect(rig.device.timerArmed).toBe(false);
  });
});

describe("rule 3: trying", () => {
  it("puts back by itself when the countdown ends", async () => {
    const rig = await trying(await runRig({ target, countdownSeconds: 10 }));
    await rig.clock.advance(9_000);
    expect(rig.run.view.state).toBe("trying");
    await rig.clock.advance(5_000);
    expect(rig.run.view.state).toBe("put-back");
    expect(rig.device.working).toMatchObject(formerValues(rig));
    expect(rig.device.counts.commits).toBe(0);
    expect(rig.notAllowed).toEqual([]);
  });

  it("refuses a Keep that comes after the countdown, though a sleeping page has not noticed its end", async () => {
    const rig = await runRig({ target, countdownSeconds: 10 });
    // A page that sleeps: its timers of seconds fire late, its clock goes on.
    const asleep = { ...rig.clock, after: (ms: number, fire: () => void) => rig.clock.after(ms === 10_000 ? 600_000 : ms, fire) };
    const run = createRun({ plan: rig.plan, journal: rig.journal, clock: asleep, identity: rig.backup.identity, session: rig.session, countdownSeconds: 10 });
    await settle(rig.clock, run.start());
    await rig.clock.advance(10_001);
    expect(await settle(rig.clock, run.keep())).toEqual({ ok: false, error: "too-late" });
    expect(rig.device.counts.commits).toBe(0);
  });

  it("recalls a changed slot to look at it, begins the countdown again, and names the slots not looked at", async () => {
    const rig = await trying(await runRig({ target, countdownSeconds: 10 }));
    expect(rig.run.view.notLookedAt).toEqual([1, 2]);
    await rig.clock.advance(8_000);
    await settle(rig.clock, rig.run.look(2));
    expect(rig.device.activeSlot).toBe(2);
    expect(rig.run.view.notLookedAt).toEqual([1]);
    await rig.clock.advance(8_000);
    expect(rig.run.view.state).toBe("trying");
    expect(rig.device.timerArmed).toBe(true);
    await rig.clock.advance(6_000);
    expect(rig.run.view.state).toBe("put-back");
    expect(rig.device.activeSlot).toBe(1);
  });

  it("looks at no slot that the plan does not change", async () => {
    const rig = await trying(await runRig({ target }));
    expect(await settle(rig.clock, rig.run.look(3))).toEqual({ ok: false, error: "not-allowed" });
    expect(rig.device.activeSlot).toBe(1);
  });
});

describe("rule 4: keeping", () => {
  it("puts back what is not as planned any more", async () => {
    const rig = await trying(await runRig({ target }));
    rig.device.operate({ kind: "write", writes: [{ key: "slots[2].placement.widthPct", value: 920 }] });
    await settle(rig.clock, rig.run.keep());
    expect(rig.run.view.state).toBe("put-back");
    expect(rig.device.counts.commits).toBe(0);
    expect(rig.device.working).toMatchObject(formerValues(rig));
  });

  it("lets two keeps at once make one commit", async () => {
    const rig = await trying(await runRig({ target }));
    const both = await settle(rig.clock, Promise.all([rig.run.keep(), rig.run.keep()]));
    expect(both.filter((one) => one.ok)).toHaveLength(1);
    expect(rig.device.counts.commits).toBe(1);
  });
});
