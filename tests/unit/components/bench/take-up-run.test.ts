import { expect, test } from "vitest";
import { benchServer } from "@/components/bench/store/bench-server";
import { createBenchCore } from "@/components/bench/store/bench-core";
import { takeUpRun } from "@/components/bench/store/run-control";
import { profileOf } from "@/tests/unit/serial/plan/plan-fixtures";
import { runRig, smallLf8 } from "@/tests/unit/serial/run/run-rig";

test("a run that was planned with another version of the driver is not taken up: nothing is sent", async () => {
  const rig = await runRig({ target: profileOf({ slots: [{ number: 2, name: "Right" }] }) });
  const core = createBenchCore({
    clock: rig.clock, account: null, server: benchServer, serial: undefined, locks: undefined, tabId: "this-tab",
    // Nothing is kept in this test: a run that is refused leaves no trace.
    storage: { length: 0, clear: () => {}, getItem: () => null, key: () => null, removeItem: () => {}, setItem: () => { throw new Error("nothing is to be kept"); } },
  });
  core.line = { driver: rig.driver, port: rig.plug.port, session: rig.session, simulated: null };
  const sentBefore = rig.plug.counts.hostToDeviceBytes;
  const input = { ...rig.plan.input, driver: { ...smallLf8, version: "9.9.9" } };
  const isTakenUp = await takeUpRun(core, { runId: null, hash: rig.plan.hash, countdownSeconds: 30, identity: rig.backup.identity, input, entries: [] }, [], true);
  expect({ isTakenUp, run: core.run }).toEqual({ isTakenUp: false, run: null });
  expect(core.store.getState().notice).toMatchObject({ tone: "halt", text: expect.stringContaining("version 9.9.9") as string });
  expect(rig.plug.counts.hostToDeviceBytes).toBe(sentBefore);
});
