import { describe, expect, it } from "vitest";
import { brackenrow4r } from "@/lib/serial/drivers/brackenrow-4r";
import { faultAtByte } from "@/lib/serial/simulator/wire-fault";
import { compiled, connect, type Rig } from "@/tests/unit/serial/simulated-rig";

const driver = compiled(brackenrow4r);
/** Two settings of one register: a Modbus reply does not say which register it is about. */
const FIRST = "native.standbyMinutes";
const SECOND = "native.outputGain";
const HELD = { [FIRST]: 30, [SECOND]: -5 };

/** A device whose next reply begins so much later than it should. */
async function slowOnce(delayMs: number): Promise<Rig> {
  const rig = await connect(driver, { values: HELD });
  rig.plug.setFault(faultAtByte("device-to-host", rig.plug.counts.deviceToHostBytes, { kind: "delay", delayMs }));
  return rig;
}

const lateOnes = ({ wireLog }: Rig) => wireLog.entries().filter(({ note }) => note === "late").length;

describe("a reply that names nothing and comes late", () => {
  it("is no answer to the request after one that was called off", async () => {
    const rig = await slowOnce(100);
    const calledOff = new AbortController();
    const first = rig.session.read([FIRST], calledOff.signal);
    const second = rig.session.read([SECOND]);
    rig.clock.after(40, () => calledOff.abort());
    expect(await rig.clock.run(first)).toMatchObject({ ok: false, error: { code: "aborted" } });
    expect(await rig.clock.run(second)).toEqual({ ok: true, value: { [SECOND]: HELD[SECOND] } });
    expect(lateOnes(rig)).toBe(1);
  });

  it("is no answer to the request after one that was sent twice, where both of its answers come", async () => {
    const { replyTimeoutMs } = driver.definition.pace;
    // After the wait, and after the silence that is held then: the same request is on its way again.
    const rig = await slowOnce(2 * replyTimeoutMs + 80);
    const first = rig.session.read([FIRST]);
    const second = rig.session.read([SECOND]);
    expect(await rig.clock.run(first)).toEqual({ ok: true, value: { [FIRST]: HELD[FIRST] } });
    expect(await rig.clock.run(second)).toEqual({ ok: true, value: { [SECOND]: HELD[SECOND] } });
    expect(rig.device.counts.readsByKey[FIRST]).toBe(2);
    expect(lateOnes(rig)).toBe(1);
  });
});
