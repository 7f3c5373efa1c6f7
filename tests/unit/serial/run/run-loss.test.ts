import { describe, expect, it } from "vitest";
import { onWrite } from "@/tests/unit/serial/plan/plan-fixtures";
import { connect } from "@/tests/unit/serial/simulated-rig";
import { cutDown, formerValues, newValues, reconnect, reload, runRig, settle, target, trying } from "./run-rig";

describe("rule 9: after a loss", () => {
  it("tries again with a new countdown where all is new and no commit left", async () => {
    const rig = await trying(await runRig({ target, countdownSeconds: 10 }));
    await rig.clock.advance(9_000);
    rig.plug.unplug();
    await rig.clock.advance(1_500);
    await settle(rig.clock, rig.run.resume(await reconnect(rig)));
    expect(rig.run.view).toMatchObject({ state: "trying", link: "up", onlyThisPagePutsBack: false });
    await rig.clock.advance(9_000);
    expect(rig.run.view.state).toBe("trying");
  });

  it("is put back where a restart brought the old values and no commit left", async () => {
    const rig = await trying(await runRig({ target }));
    rig.plug.unplug();
    rig.device.powerCycle();
    await rig.clock.advance(2_000);
    await settle(rig.clock, rig.run.resume(await reconnect(rig)));
    expect(rig.run.view.state).toBe("put-back");
  });

  it("leaves the choice to the owner in the midst of writing, and finishes from there", async () => {
    const rig = await runRig({ target });
    const started = rig.run.start();
    const stopWatching = rig.run.onView((view) => {
      if (view.state !== "writing" || view.progress.done !== 3) return;
      stopWatching();
      rig.plug.unplug();
    });
    await settle(rig.clock, started);
    expect(rig.run.view).toMatchObject({ state: "writing", link: "lost" });
    await settle(rig.clock, rig.run.resume(await reconnect(rig)));
    expect(rig.run.view.state).toBe("mixed");
    await settle(rig.clock, rig.run.finish());
    expect(rig.run.view.state).toBe("trying");
    expect(rig.device.working).toMatchObject(newValues(rig));
    expect(rig.notAllowed).toEqual([]);
  });

  it("takes a closed tab up from its journal", async () => {
    const rig = await trying(await runRig({ target }));
    await rig.clock.run(rig.session.close());
    const run = reload(rig);
    expect(run.view).toMatchObject({ state: "trying", link: "lost" });
    await settle(rig.clock, run.resume(await reconnect(rig)));
    expect(run.view.state).toBe("trying");
    await settle(rig.clock, run.keep());
    expect(run.view.state).toBe("kept");
  });

  it("refuses a twin with another serial number", async () => {
    const rig = await trying(await runRig({ target }));
    rig.plug.unplug();
    await rig.clock.advance(10);
    const twin = await connect(rig.driver, { serialNumber: "LF8-0002", values: rig.device.working });
    expect(await settle(twin.clock, rig.run.resume(twin.session))).toEqual({ ok: false, error: "other-device" });
    expect(rig.run.view.link).toBe("lost");
    expect(twin.device.counts.writes).toBe(0);
  });

  it("is called off where the link went before anything was written", async () => {
    const rig = await runRig({ target });
    rig.plug.unplug();
    await rig.clock.advance(10);
    expect(await settle(rig.clock, rig.run.start())).toEqual({ ok: false, error: "link-lost" });
    await settle(rig.clock, rig.run.resume(await reconnect(rig)));
    expect(rig.run.view.state).toBe("called-off");
  });
});

describe("rule 10: a device that stores at once", () => {
  const atOnce = cutDown({ ...onWrite, memory: { volatileWrites: false, commitTakesMs: 0 } }, 3, 4);

  it("counts down all the same, commits nothing, and puts the former values back by writing them", async () => {
    const kept = await trying(await runRig({ target, definition: atOnce }));
    await settle(kept.clock, kept.run.keep());
    expect({ state: kept.run.view.state, commits: kept.device.counts.commits }).toEqual({ state: "kept", commits: 0 });
    expect(kept.device.stored).toMatchObject(newValues(kept));
    const back = await trying(await runRig({ target, definition: atOnce }));
    await settle(back.clock, back.run.putBack());
    expect(back.run.view.state).toBe("put-back");
    expect(back.device.stored).toMatchObject(formerValues(back));
    expect([...kept.notAllowed, ...back.notAllowed]).toEqual([]);
  });
});
