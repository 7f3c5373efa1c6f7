import { describe, expect, test } from "vitest";
import { faultScript, type FaultRule } from "@/lib/serial/simulator/fault-script";
import { connect } from "@/tests/unit/serial/simulated-rig";

const KEY = "slots[1].placement.offsetPx";

async function withRules(rules: readonly FaultRule[]) {
  const rig = await connect();
  const script = faultScript(rules);
  rig.plug.setFault(script.wire);
  rig.device.setFault(script.device);
  return rig;
}

describe("a fault script", () => {
  test("strikes at the n-th byte after it was set, once: the read is asked again and done", async () => {
    const { session, clock, plug } = await withRules([{ place: "device-to-host", fault: { kind: "flip", mask: 1 }, when: { kind: "nth", n: 5, lasting: false } }]);
    const before = plug.counts.hostToDeviceBytes;
    expect(await clock.run(session.read([KEY]))).toMatchObject({ ok: true, value: { [KEY]: 0 } });
    // "SLOT1:HPOS?" with its check and line end, twice.
    expect(plug.counts.hostToDeviceBytes - before).toBe(34);
  });

  test("strikes at that byte and every one after it where it lasts: the device is out of reach", async () => {
    const { session, clock } = await withRules([{ place: "device-to-host", fault: { kind: "drop" }, when: { kind: "nth", n: 1, lasting: true } }]);
    expect((await clock.run(session.read([KEY]))).ok).toBe(false);
  });

  test("by chance the same seed strikes at the same bytes", () => {
    const rule = (seed: number): FaultRule => ({ place: "host-to-device", fault: { kind: "drop" }, when: { kind: "rate", oneIn: 20, seed } });
    const fates = (seed: number) => {
      const { wire } = faultScript([rule(seed)]);
      return Array.from({ length: 2000 }, (_, index) => wire.onByte(65, index, "host-to-device").kind !== "pass");
    };
    expect(fates(7)).toEqual(fates(7));
    expect(fates(7)).not.toEqual(fates(8));
    const struck = fates(7).filter(Boolean).length;
    // 100 expected; five standard deviations of a binomial with p = 1/20 are 49.
    expect(Math.abs(struck - 100)).toBeLessThan(49);
  });

  test("inside the device it strikes at operations of its kind alone, and others are done", async () => {
    const { session, clock, device } = await withRules([{ place: "device", operation: "commit", fault: { kind: "ignore" }, when: { kind: "nth", n: 1, lasting: true } }]);
    await clock.run(session.write([{ key: KEY, value: 3 }]));
    await clock.run(session.commit());
    expect({ working: device.working[KEY], stored: device.stored[KEY] }).toEqual({ working: 3, stored: 0 });
  });

  test("of two rules that strike at one byte the first decides, and both count", () => {
    const nth = (n: number, mask: number): FaultRule => ({ place: "host-to-device", fault: { kind: "flip", mask }, when: { kind: "nth", n, lasting: false } });
    const { wire } = faultScript([nth(1, 1), nth(1, 2), nth(2, 4)]);
    expect([wire.onByte(0, 0, "host-to-device"), wire.onByte(0, 1, "host-to-device"), wire.onByte(0, 2, "host-to-device")]).toEqual([
      { kind: "replace", bytes: [1] }, { kind: "replace", bytes: [4] }, { kind: "pass" },
    ]);
  });
});
