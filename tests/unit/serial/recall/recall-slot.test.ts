import { describe, expect, it } from "vitest";
import { recallSlot, type RecallRequest } from "@/lib/serial/recall/recall-slot";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";
import type { WireFault } from "@/lib/serial/simulator/wire-fault";
import { connect, type Rig } from "@/tests/unit/serial/simulated-rig";
import { rasterOf, television } from "@/tests/unit/serial/plan/plan-fixtures";
import { cutDown } from "@/tests/unit/serial/run/run-rig";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";

const definition = cutDown(lanternfieldLf8, 5, 5);

async function recall(rig: Rig, slot: number, over: Partial<RecallRequest> = {}) {
  const request = { session: rig.session, driver: rig.driver, slot, screen: television, acknowledged: [], ...over };
  const result = await rig.clock.run(recallSlot(request));
  if (!result.ok) throw new Error(result.error.message);
  return result.value;
}

async function acknowledged(rig: Rig, slot: number, over: Partial<RecallRequest> = {}) {
  const first = await recall(rig, slot, over);
  return first.kind === "ask" ? recall(rig, slot, { ...over, acknowledged: first.toAcknowledge }) : first;
}

/** A line that swallows every request that begins so. */
function losesLines(start: string): WireFault {
  let line = "";
  return {
    onByte(byte, _index, direction) {
      if (direction === "device-to-host") return { kind: "pass" };
      line += String.fromCharCode(byte);
      const swallowed = line.length >= start.length && line.startsWith(start);
      if (byte === 10) line = "";
      return swallowed ? { kind: "replace", bytes: [] } : { kind: "pass" };
    },
  };
}

describe("recalling a slot", () => {
  it("checks first, leaves once, and is read back", async () => {
    const rig = await connect(compiledDriver(definition));
    const outcome = await acknowledged(rig, 3);
    expect(outcome).toMatchObject({ kind: "done", rasterOut: rasterOf(definition, 3) });
    expect({ active: rig.device.activeSlot, recalls: rig.device.counts.recalls, writes: rig.device.counts.writes }).toEqual({ active: 3, recalls: 1, writes: 0 });
  });

  it("never leaves where the mode does not fit the screen", async () => {
    const rig = await connect(compiledDriver(definition));
    const outcome = await recall(rig, 5);
    expect(outcome.kind).toBe("stopped");
    expect(outcome.kind === "stopped" && outcome.findings.some(({ rule, severity }) => rule === "screen.line-rate" && severity === "stop")).toBe(true);
    expect(rig.device.counts.recalls).toBe(0);
  });

  it("takes the slot as working memory has it now, not as it was backed up", async () => {
    const rig = await connect(compiledDriver(definition));
    rig.device.operate({ kind: "write", writes: [{ key: "slots[3].mode", value: 5 }] });
    expect((await recall(rig, 3)).kind).toBe("stopped");
    expect(rig.device.counts.recalls).toBe(0);
  });

  it("never leaves where nothing arrives and the raster that comes out then does not fit", async () => {
    const rig = await connect(compiledDriver(definition), { source: null });
    const outcome = await recall(rig, 2);
    expect(outcome.kind === "stopped" && outcome.findings.find(({ severity }) => severity === "stop")?.rule).toBe("screen.idle");
    expect(rig.device.counts.recalls).toBe(0);
  });

  it("asks first where another input is on and may have nothing", async () => {
    const rig = await connect(compiledDriver(definition), { values: { "slots[2].input": "A1" } });
    const outcome = await recall(rig, 2);
    expect(outcome.kind === "ask" && outcome.toAcknowledge.some((one) => one.startsWith("screen.idle "))).toBe(true);
    expect(rig.device.counts.recalls).toBe(0);
    expect((await acknowledged(rig, 2)).kind).toBe("done");
  });

  it("asks first where the screen is unknown", async () => {
    const rig = await connect(compiledDriver(definition));
    expect(await recall(rig, 5, { screen: "unknown" })).toMatchObject({ kind: "ask", toAcknowledge: expect.arrayContaining(["unknown.screen slots[5]"]) as string[] });
    expect(rig.device.counts.recalls).toBe(0);
  });

  it("never leaves for an empty slot", async () => {
    const rig = await connect(compiledDriver(definition), { values: { "slots[4].mode": 0 } });
    expect((await recall(rig, 4)).kind).toBe("stopped");
  });

  it("settles a lost reply by reading back, and sends no second one", async () => {
    const rig = await connect(compiledDriver(definition));
    rig.device.setFault((operation) => (operation.kind === "action" && operation.name === "recall" ? { kind: "silent" } : undefined));
    expect((await acknowledged(rig, 3)).kind).toBe("done");
    expect(rig.device.counts.recalls).toBe(1);
  });

  it("says which slot is on where the recall did not arrive", async () => {
    const rig = await connect(compiledDriver(definition));
    rig.plug.setFault(losesLines("*RCL"));
    const outcome = await acknowledged(rig, 3);
    expect(outcome).toEqual({ kind: "other-slot", activeSlot: 1 });
  });
});
