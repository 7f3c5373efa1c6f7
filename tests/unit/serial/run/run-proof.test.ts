import { describe, expect, it } from "vitest";
import { formerValues, newValues, reconnect, runRig, settle, smallLf8, target, trying } from "./run-rig";

describe("rule 5: proof", () => {
  const commitFails = (kind: "ignore" | "silent") => (operation: { kind: string; name?: unknown }) =>
    operation.kind === "action" && operation.name === "commit" ? ({ kind } as const) : undefined;

  it("never takes an acknowledgement for a proof: a commit that stored nothing stays unconfirmed", async () => {
    const rig = await trying(await runRig({ target }));
    rig.device.setFault(commitFails("ignore"));
    await settle(rig.clock, rig.run.keep());
    expect(rig.run.view.state).toBe("unconfirmed");
    rig.device.setFault(null);
    await settle(rig.clock, rig.run.finish());
    expect(rig.run.view.state).toBe("kept");
    expect(rig.device.stored).toMatchObject(newValues(rig));
  });

  it("keeps where the reply was lost and the device says that it is stored", async () => {
    const rig = await trying(await runRig({ target }));
    rig.device.setFault(commitFails("silent"));
    await settle(rig.clock, rig.run.keep());
    expect(rig.run.view.state).toBe("kept");
    expect(rig.device.counts.commits).toBe(1);
  });

  /** A driver that cannot say what is stored: the same device without that query. */
  const cannotSay = { ...smallLf8, status: { ...smallLf8.status, committed: undefined } };

  it("waits for a restart where the device cannot say what it stored, and then keeps", async () => {
    const rig = await trying(await runRig({ target, definition: cannotSay }));
    await settle(rig.clock, rig.run.keep());
    expect(rig.run.view.state).toBe("unconfirmed");
    await settle(rig.clock, rig.run.readAgain());
    expect(rig.run.view.state).toBe("unconfirmed");
    rig.device.powerCycle();
    await rig.clock.advance(2_000);
    await settle(rig.clock, rig.run.readAgain());
    expect(rig.run.view.state).toBe("kept");
  });

  it("does not keep what a restart shows to be lost", async () => {
    const rig = await trying(await runRig({ target, definition: cannotSay }));
    rig.device.setFault(commitFails("ignore"));
    await settle(rig.clock, rig.run.keep());
    rig.device.powerCycle();
    await rig.clock.advance(2_000);
    await settle(rig.clock, rig.run.readAgain());
    expect(rig.run.view.state).toBe("put-back");
    expect(rig.device.stored).toMatchObject(formerValues(rig));
  });

  it("does not take a restart before the last write for a proof of the next commit", async () => {
    const rig = await trying(await runRig({ target, definition: cannotSay }));
    rig.device.setFault((operation) => (operation.kind === "action" && operation.name === "commit" ? { kind: "torn", stored: 1 } : undefined));
    await settle(rig.clock, rig.run.keep());
    rig.device.powerCycle();
    await rig.clock.advance(2_000);
    await settle(rig.clock, rig.run.readAgain());
    expect(rig.run.view.state).toBe("mixed");
    rig.device.setFault(commitFails("ignore"));
    await settle(rig.clock, rig.run.finish());
    await settle(rig.clock, rig.run.readAgain());
    expect(rig.run.view.state).toBe("unconfirmed");
  });

  it("keeps by the owner's last word alone: all new after a Put back that got nowhere is the owner's to settle", async () => {
    const rig = await trying(await runRig({ target }));
    rig.device.setFault(commitFails("ignore"));
    await settle(rig.clock, rig.run.keep());
    rig.device.setFault(null);
    rig.device.operate({ kind: "action", name: "commit", fields: {} });
    const stopWatching = rig.run.onView((view) => {
      if (view.state !== "putting-back") return;
      stopWatching();
      rig.plug.unplug();
    });
    await settle(rig.clock, rig.run.putBack());
    await settle(rig.clock, rig.run.resume(await reconnect(rig)));
    expect(rig.run.view.state).toBe("mixed");
    await settle(rig.clock, rig.run.finish());
    expect(rig.run.view.state).toBe("kept");
  });

  it("believes the owner's switch-off only until the next write", async () => {
    const blind = { ...cannotSay, status: { ...cannotSay.status, bootCount: undefined } };
    const rig = await trying(await runRig({ target, definition: blind }));
    await settle(rig.clock, rig.run.keep());
    expect(rig.run.view.lastWriteAtMs).toBe(rig.clock.wallMs());
    await settle(rig.clock, rig.run.putBack());
    expect(rig.run.view.state).toBe("unconfirmed");
    rig.device.powerCycle();
    await rig.clock.advance(2_000);
    await settle(rig.clock, rig.run.stateCycled());
    expect(rig.run.view.state).toBe("put-back");
    expect(rig.device.stored).toMatchObject(formerValues(rig));
  });
});

describe("rule 6: putting back", () => {
  it("commits the former values where a commit may have left, and proves it", async () => {
    const rig = await trying(await runRig({ target }));
    rig.device.setFault((operation) => (operation.kind === "action" && operation.name === "commit" ? { kind: "torn", stored: 1 } : undefined));
    await settle(rig.clock, rig.run.keep());
    expect(rig.run.view.state).toBe("unconfirmed");
    rig.device.setFault(null);
    await settle(rig.clock, rig.run.putBack());
    expect(rig.run.view.state).toBe("put-back");
    expect(rig.device.stored).toMatchObject(formerValues(rig));
    expect(rig.device.counts.commits).toBe(2);
  });

  it("lists each setting as old, new or other where the device reaches neither side, and can still put back", async () => {
    const rig = await trying(await runRig({ target }));
    rig.device.setFault((operation) => (operation.kind === "write" && operation.writes[0]?.key === "slots[1].name" ? { kind: "refuse" } : undefined));
    await settle(rig.clock, rig.run.putBack());
    expect(rig.run.view.state).toBe("mixed");
    expect(rig.run.view.standings.map(({ key, standing }) => [key, standing])).toContainEqual(["slots[1].name", "new"]);
    expect(rig.run.view.standings.every(({ key, found }) => rig.device.working[key] === found)).toBe(true);
    rig.device.setFault(null);
    await settle(rig.clock, rig.run.putBack());
    expect(rig.run.view.state).toBe("put-back");
  });

  it("can be left by the owner's word alone", async () => {
    const rig = await trying(await runRig({ target }));
    expect(await settle(rig.clock, rig.run.leave())).toEqual({ ok: false, error: "wrong-state" });
    rig.device.setFault((operation) => (operation.kind === "write" ? { kind: "refuse" } : undefined));
    await settle(rig.clock, rig.run.putBack());
    await settle(rig.clock, rig.run.leave());
    expect(rig.run.view.state).toBe("left");
  });
});

describe("rule 7: the device timer", () => {
  it("puts the old values back by itself when the page is gone, and the run knows", async () => {
    const rig = await trying(await runRig({ target, countdownSeconds: 10 }));
    rig.plug.unplug();
    await rig.clock.advance(25_000);
    expect(rig.device.working).toMatchObject(formerValues(rig));
    expect(rig.run.view).toMatchObject({ state: "trying", link: "lost" });
    await settle(rig.clock, rig.run.resume(await reconnect(rig)));
    expect(rig.run.view.state).toBe("put-back");
  });

  it("is named as absent where only the page puts back", async () => {
    const rig = await trying(await runRig({ target, definition: { ...smallLf8, memory: { ...smallLf8.memory, deviceTimer: undefined } } }));
    expect(rig.run.view.onlyThisPagePutsBack).toBe(true);
  });
});
