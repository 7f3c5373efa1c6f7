import { expect, test } from "vitest";
import { wireLimitMs } from "@/lib/serial/driver/costs";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";
import { shippedDrivers } from "@/lib/serial/drivers/shipped";
import { takeBackup } from "@/lib/serial/backup/take-backup";
import { faultAtByte } from "@/lib/serial/simulator/wire-fault";
import { connect } from "@/tests/unit/serial/simulated-rig";

test.each(shippedDrivers.map((definition) => [definition.slug, definition] as const))(
  "one flipped bit costs a backup of %s a few waits for a reply, and not its pace from there on",
  async (_slug, definition) => {
    const driver = compiledDriver(definition);
    const { session, clock, plug } = await connect(driver);
    const fault = faultAtByte("device-to-host", plug.counts.deviceToHostBytes + 40, { kind: "flip", mask: 1 });
    plug.setFault(fault);
    const fromMs = clock.nowMs();
    expect(await clock.run(takeBackup(session, driver))).toMatchObject({ ok: true });
    expect(fault.fired).toBe(true);
    // What waited for the damaged reply, and each in flight beside it: once for its own answer, once for the line to clear.
    const waits = 2 * (1 + definition.pace.inFlight);
    expect(clock.nowMs() - fromMs).toBeLessThan(1.3 * wireLimitMs(driver) + waits * (definition.pace.replyTimeoutMs + 100));
  },
);
