import { describe, expect, it } from "vitest";
import type { NativeValues } from "@/lib/serial/native";
import { align, aligning, DEVICES, nativeOf, offset, porches, reloadAlignment, type AlignRig } from "./align-rig";
import { formerValues, newValues, reconnect, reload, runRig, settle, smallLf8, target, trying } from "./run-rig";

const devices = Object.entries(DEVICES).map(([name, definition]) => ({ name, definition }));

/** Pulls the plug once a number of requests of the next step are done; 0: before its first byte leaves. */
function unplugAfter(rig: AlignRig, done: number): void {
  const { append } = rig.journal;
  let left: number | null = null;
  Object.assign(rig.journal, {
    append: async (entry: Parameters<typeof append>[0]) => {
      await append(entry);
      if (entry.kind === "align") left ??= done;
      else if (left !== null && entry.kind === "request" && entry.outcome === "done") left -= 1;
      if (left !== 0) return;
      rig.journal.append = append;
      rig.plug.unplug();
    },
  });
}

const held = (rig: AlignRig, wanted: NativeValues) => Object.entries(wanted).every(([key, value]) => rig.device.working[key] === value);

describe.each(devices)("what was aligned counts as new on $name", ({ definition }) => {
  it("after the page is closed: the journal alone knows it, and Keep keeps it", async () => {
    const rig = await aligning(definition);
    await settle(rig.clock, align(rig, porches(6)));
    await settle(rig.clock, align(rig, offset(4)));
    rig.run.release();
    await rig.clock.run(rig.session.close());
    const run = reloadAlignment(rig);
    expect(run.values).toMatchObject({ ...nativeOf(rig, porches(6)), ...nativeOf(rig, offset(4)) });
    await settle(rig.clock, run.resume(await reconnect(rig)));
    expect(run.view.state).toBe("trying");
    await settle(rig.clock, align(rig, offset(6), run));
    await settle(rig.clock, run.keep());
    expect(["kept", "unconfirmed"]).toContain(run.view.state);
    expect(rig.device.stored).toMatchObject({ ...nativeOf(rig, porches(6)), ...nativeOf(rig, offset(6)) });
  });

  it("not where a step never left: what was tried before it is tried again, also after a second reload", async () => {
    const rig = await aligning(definition);
    await settle(rig.clock, align(rig, offset(2)));
    unplugAfter(rig, 0);
    await settle(rig.clock, align(rig, offset(8)));
    expect(rig.run.view).toMatchObject({ state: "trying", link: "lost" });
    await settle(rig.clock, rig.run.resume(await reconnect(rig)));
    expect(rig.run.view.state).toBe("trying");
    expect(rig.run.values).toMatchObject(nativeOf(rig, offset(2)));
    expect(reloadAlignment(rig).values).toMatchObject(nativeOf(rig, offset(2)));
    await settle(rig.clock, align(rig, offset(10)));
    expect(reloadAlignment(rig).values).toMatchObject(nativeOf(rig, offset(10)));
    await settle(rig.clock, rig.run.putBack());
    expect(rig.run.view.state).toBe("put-back");
    expect(rig.device.working).toMatchObject(nativeOf(rig, offset(0)));
  });

  it.each(["finish", "putBack"] as const)("after a loss in the midst of a porch step the owner chooses, here to %s", async (choice) => {
    const rig = await aligning(definition);
    await settle(rig.clock, align(rig, offset(2)));
    unplugAfter(rig, 1);
    await settle(rig.clock, align(rig, porches(-30)));
    await rig.clock.advance(10);
    expect(rig.run.view.link).toBe("lost");
    await settle(rig.clock, rig.run.resume(await reconnect(rig)));
    // A block carries both numbers, and then the step is whole; a single write is half of it.
    const whole = held(rig, nativeOf(rig, porches(-30)));
    expect(rig.run.view.state).toBe(whole ? "trying" : "mixed");
    await settle(rig.clock, choice === "finish" ? (whole ? rig.run.keep() : rig.run.finish()) : rig.run.putBack());
    if (choice === "finish") expect(rig.device.working).toMatchObject({ ...nativeOf(rig, porches(-30)), ...nativeOf(rig, offset(2)) });
    else expect(rig.device.working).toMatchObject({ ...nativeOf(rig, porches(0)), ...nativeOf(rig, offset(0)) });
    expect(rig.run.view.state).toBe(choice === "putBack" ? "put-back" : whole ? "kept" : "trying");
    expect(rig.notAllowed).toEqual([]);
  });

  it("at Keep: anything else on the device starts putting back", async () => {
    const rig = await aligning(definition);
    await settle(rig.clock, align(rig, offset(4)));
    rig.device.operate({ kind: "write", writes: Object.entries(nativeOf(rig, offset(2))).map(([key, value]) => ({ key, value })) });
    await settle(rig.clock, rig.run.keep());
    expect(rig.run.view.state).toBe("put-back");
    expect(rig.device.working).toMatchObject(nativeOf(rig, offset(0)));
    expect(rig.device.counts.commits).toBe(0);
  });

  it("writes nothing upon a device that has started anew between two steps", async () => {
    const rig = await aligning(definition, { device: { values: { "everywhere.powerOnSlot": 2 }, activeSlot: 1 } });
    await settle(rig.clock, align(rig, porches(6)));
    rig.device.powerCycle();
    await rig.clock.advance(2_000);
    const { writes } = rig.device.counts;
    await settle(rig.clock, align(rig, porches(10)));
    expect(rig.device.counts.writes).toBe(writes);
    // With working memory gone all is old, in another slot than at the start; without one the step before is still there.
    expect(rig.run.view.state).toBe(definition.memory.volatileWrites ? "mixed" : "trying");
    expect(rig.notAllowed).toEqual([]);
  });
});

describe("steps that join a plan's trial", () => {
  it("are kept with the plan, and put back with it", async () => {
    const kept = await trying(await runRig({ target, countdownSeconds: 10 }));
    const right = [{ path: "slots[1].placement.offsetPx", value: 6 }];
    await kept.clock.advance(8_000);
    await settle(kept.clock, kept.run.align(right));
    await kept.clock.advance(8_000);
    expect(kept.run.view).toMatchObject({ state: "trying", notLookedAt: [2] });
    await settle(kept.clock, kept.run.keep());
    expect(kept.run.view.state).toBe("kept");
    expect(kept.device.stored).toMatchObject({ ...newValues(kept), ...nativeOf(kept, right) });
    const back = await trying(await runRig({ target }));
    await settle(back.clock, back.run.align(right));
    await settle(back.clock, back.run.putBack());
    expect(back.run.view.state).toBe("put-back");
    expect(back.device.working).toMatchObject({ ...formerValues(back), "slots[1].placement.offsetPx": 0 });
    expect([...kept.notAllowed, ...back.notAllowed]).toEqual([]);
  });

  it("are taken up from the journal with the plan's own values", async () => {
    const rig = await trying(await runRig({ target, definition: smallLf8 }));
    const right = [{ path: "slots[1].placement.offsetPx", value: 6 }];
    await settle(rig.clock, rig.run.align(right));
    await rig.clock.run(rig.session.close());
    const run = reload(rig);
    await settle(rig.clock, run.resume(await reconnect(rig)));
    expect(run.view.state).toBe("trying");
    expect(run.values).toMatchObject({ ...newValues(rig), ...nativeOf(rig, right) });
  });

  it("are not made upon what a restart brought back", async () => {
    const rig = await trying(await runRig({ target, countdownSeconds: 10 }));
    const { writes } = rig.device.counts;
    rig.device.powerCycle();
    await rig.clock.advance(2_000);
    await settle(rig.clock, rig.run.align([{ path: "slots[1].placement.offsetPx", value: 6 }]));
    expect(rig.run.view.state).toBe("put-back");
    expect(rig.device.counts.writes).toBe(writes);
  });
});
