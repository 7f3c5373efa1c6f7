import { expect, test } from "vitest";
import { runSteps } from "@/components/bench/run-steps";
import { shippedDriver } from "@/lib/serial/drivers/shipped";
import { profileOf } from "@/tests/unit/serial/plan/plan-fixtures";
import { runRig, settle, trying } from "@/tests/unit/serial/run/run-rig";

test("each request of a real run has its words, what became of it, and the bytes that it put on the wire", async () => {
  const rig = await trying(await runRig({ target: profileOf({ slots: [{ number: 2, name: "Right", placement: { offsetPx: 4 } }] }) }));
  await settle(rig.clock, rig.run.keep());
  const steps = runSteps(rig.journal.entries, shippedDriver("lanternfield-lf8"));
  expect(steps.map(({ what, outcome }) => `${what}: ${outcome}`.replace(/\s/gu, " "))).toEqual(expect.arrayContaining([
    "Arm the device's timer: done", "Write Slot 2, Name Right: read back", "Write Slot 2, Horizontal position 4 px: read back", "Store in non-volatile memory: done",
  ]));
  const write = steps.find(({ what }) => what.includes("Horizontal position"));
  const during = rig.wireLog.entries().filter(({ wallMs }) => write !== undefined && wallMs >= write.stretch.fromMs && wallMs <= write.stretch.toMs);
  // The order and the question; at the last millisecond the next request may leave too.
  expect(during.filter(({ direction }) => direction === "out").slice(0, 2).map(({ text }) => text.replace(/\*.*/u, ""))).toEqual(["SLOT2:HPOS 4", "SLOT2:HPOS?"]);
});
