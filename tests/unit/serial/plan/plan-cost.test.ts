import { describe, expect, it } from "vitest";
import { stepsCost } from "@/lib/serial/plan/plan-cost";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";
import { shippedDrivers } from "@/lib/serial/drivers/shipped";
import { planEdits } from "@/lib/serial/plan/plan-edits";
import { takeBackup } from "@/lib/serial/backup/take-backup";
import type { PlanStep } from "@/lib/serial/plan/types";
import { connect } from "@/tests/unit/serial/simulated-rig";

describe.each(shippedDrivers.map((definition) => [definition.slug, definition] as const))("what a plan costs on %s", (_slug, definition) => {
  it("is the bytes that its writes, read-backs, recalls and mute orders put on the wire", async () => {
    const driver = compiledDriver(definition);
    const { session, clock, wireLog } = await connect(driver);
    const bytesSince = async (act: () => Promise<unknown>) => {
      const from = wireLog.entries().at(-1)?.number ?? 0;
      await clock.run(act());
      return wireLog.entries().filter(({ number }) => number > from).reduce((sum, { bytes }) => sum + bytes.length, 0);
    };
    const backup = await clock.run(takeBackup(session, driver));
    if (!backup.ok) throw new Error(backup.error.message);
    const { content, activeSlot: slot, rasterOut } = backup.value;
    const input = {
      backup: content, driver: definition, screen: "accepted-unknown" as const, source: null, activeSlot: slot, rasterOut,
      edits: [{ path: `slots[${slot}].placement.offsetPx`, value: 2 }],
    };
    const { toAcknowledge } = planEdits({ ...input, acknowledged: [] });
    const { plan } = planEdits({ ...input, acknowledged: toAcknowledge });
    const write = plan?.steps.find((step) => step.kind === "write");
    if (write?.kind !== "write") throw new Error("no write in the plan");
    const recall: PlanStep = { kind: "recall", slot, why: "return", rasterAfter: rasterOut ?? null };
    const written = await bytesSince(async () => {
      await session.write(write.writes);
      await session.read(write.writes.map(({ key }) => key));
    });
    const recalled = await bytesSince(async () => {
      await session.recall(slot);
      await session.activeSlot();
      if (definition.timingTakesEffect === "recall") await session.rasterOut();
    });
    expect(stepsCost(driver, [write]).bytes).toBe(written);
    expect(stepsCost(driver, [recall]).bytes).toBe(recalled);
    if (definition.actions.muteOn === undefined) return;
    const muted = await bytesSince(async () => {
      await session.mute(true);
      await session.mute(false);
    });
    const orders = [true, false].map((on): PlanStep => ({ kind: "mute", on, rasterAfter: null }));
    expect(muted).toBeGreaterThan(0);
    expect(stepsCost(driver, orders).bytes).toBe(muted);
  });
});
