import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { createVirtualClock } from "@/lib/serial/clock/virtual-clock";
import { encodeLine } from "@/lib/serial/protocols/text/line";
import { createDeviceModel } from "@/lib/serial/simulator/device-model";
import { MAX_WAITING } from "@/lib/serial/simulator/work-queue";
import { lf8 } from "@/tests/unit/serial/simulated-rig";

const { protocol } = lf8.definition;

function terminal() {
  const clock = createVirtualClock();
  const model = createDeviceModel(lf8, { clock });
  let said = "";
  model.attach((bytes) => {
    said += new TextDecoder().decode(bytes);
  });
  const checked = (body: string) => {
    if (protocol.kind !== "text") throw new Error("not text");
    return encodeLine(protocol, body);
  };
  const ask = async (line: string | Uint8Array, ms = 1000) => {
    said = "";
    model.receive(typeof line === "string" ? new TextEncoder().encode(line) : line);
    await clock.advance(ms);
    return said;
  };
  return { clock, model, ask, checked };
}

describe("the simulated device at a terminal", () => {
  // Source: IEEE 488.2 and SCPI forms as in tests/fixtures/standards/ieee488.json.
  it("answers *IDN?, *OPC? and SYST:ERR? without a check, in the standard's forms", async () => {
    const { ask } = terminal();
    const identity = (await ask("*IDN?\n")).trimEnd().split(",");
    expect(identity).toEqual(["Lanternfield", "LF-8", "LF8-0001", "3.4"]);
    expect(await ask("*OPC?\n")).toBe("1\n");
    expect(await ask("SYST:ERR?\n")).toBe("0,\"No error\"\n");
    expect(await ask("NONSENSE\n")).toBe("");
    expect(await ask("SYST:ERR?\n")).toBe("-113,\"Undefined header\"\n");
    expect(await ask("SYST:ERR?\n")).toBe("0,\"No error\"\n");
  });

  it("queues errors first in, first out, and says when there were too many", async () => {
    const { ask } = terminal();
    await ask("SLOT1:HPOS 4\n");
    for (let count = 0; count < 20; count += 1) await ask("NONSENSE\n");
    expect(await ask("SYST:ERR?\n")).toBe("201,\"Check missing\"\n");
    const rest = [];
    for (let count = 0; count < 15; count += 1) rest.push(await ask("SYST:ERR?\n"));
    expect(rest.slice(0, 14)).toEqual(Array(14).fill("-113,\"Undefined header\"\n"));
    expect(rest[14]).toBe("-350,\"Queue overflow\"\n");
    expect(await ask("SYST:ERR?\n")).toBe("0,\"No error\"\n");
  });

  it("does nothing that is asked without a check or with a wrong one", async () => {
    const { model, ask } = terminal();
    expect(await ask("SLOT1:HPOS 12\n")).toBe("");
    expect(await ask("SLOT1:HPOS 12*FFFF\n")).toBe("");
    expect(model.working["slots[1].placement.offsetPx"]).toBe(0);
  });

  it("names the setting in every answer, refusals too", async () => {
    const { ask, checked } = terminal();
    expect(await ask(checked("SLOT1:HPOS 12"))).toMatch(/^SLOT1:HPOS=12\*[0-9A-F]{4}\n$/u);
    expect(await ask(checked("SLOT1:HPOS?"))).toMatch(/^SLOT1:HPOS=12\*[0-9A-F]{4}\n$/u);
    expect(await ask(checked("SLOT1:HPOS 99"))).toMatch(/^SLOT1:HPOS!-222 Data out of range\*[0-9A-F]{4}\n$/u);
  });

  it("works one command after another, each for its time", async () => {
    const { clock, model, checked } = terminal();
    const times: number[] = [];
    model.attach(() => times.push(clock.nowMs()));
    for (const body of ["SLOT1:HPOS?", "MEM:COMMIT", "SLOT1:VPOS?"]) model.receive(checked(body));
    await clock.advance(1000);
    expect(times).toEqual([2, 184, 186]);
  });

  it("drops what is more than it can hold, and says so", async () => {
    const { ask, checked } = terminal();
    const line = checked("*OPC?");
    const many = Uint8Array.from(Array.from({ length: MAX_WAITING + 10 }, () => [...line]).flat());
    expect((await ask(many)).split("\n")).toHaveLength(MAX_WAITING + 1);
    expect(await ask("SYST:ERR?\n")).toBe("-363,\"Input buffer overrun\"\n");
  });

  it("hears nothing while it starts, and chats", async () => {
    const { clock, model } = terminal();
    let said = "";
    model.attach((bytes) => {
      said += new TextDecoder().decode(bytes);
    });
    model.restart();
    model.receive(new TextEncoder().encode("*IDN?\n"));
    await clock.advance(1000);
    expect(said).toBe("LF-8 starting\nmemory ok, output idle\n");
  });

  it("has the fixture's own words for its two errors", () => {
    const { errors } = JSON.parse(readFileSync("tests/fixtures/standards/ieee488.json", "utf8")) as { errors: Record<string, string> };
    expect(errors).toMatchObject({ "-113": "Undefined header", "-350": "Queue overflow" });
  });
});
