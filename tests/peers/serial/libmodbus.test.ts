import { spawn } from "node:child_process";
import { describe, expect, test } from "vitest";
import { compileDriver } from "@/lib/serial/driver/compile";
import { readsOfAll } from "@/lib/serial/driver/costs";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { withProgram } from "./compile-c";
import { withSession } from "./live-session";
import { connectSerial } from "./open-duplex";
import { endProcess, withPtyPair } from "./pty-pair";
import { registerAtStart, registerDevice, REGISTERS } from "./register-device";

function compiledDevice(): CompiledDriver {
  const result = compileDriver(registerDevice);
  if (!result.ok) throw new Error(JSON.stringify(result.error));
  return result.value;
}

const driver = compiledDevice();
const keyOf = (register: number) => `native.r${register}`;

/** Runs `body` with the terminal at whose far end the libmodbus server listens. */
function withServer<T>(body: (terminal: string) => Promise<T>): Promise<T> {
  const { transport, protocol } = driver.definition;
  const unit = protocol.kind === "modbus-rtu" ? String(protocol.unit) : "";
  return withProgram("register-server", (program) =>
    withPtyPair(async (near, far) => {
      const server = spawn(program, [far, String(transport.baudRate), unit], { stdio: ["ignore", "pipe", "inherit"] });
      try {
        await new Promise<void>((resolve, reject) => {
          server.stdout.once("data", () => resolve());
          server.once("exit", (code) => reject(new Error(`The server ended with ${code}`)));
        });
        return await body(near);
      } finally {
        await endProcess(server);
      }
    }),
  );
}

describe("a server on libmodbus with 200 registers", () => {
  test("is read whole in the fewest requests that Modbus allows, and every register is what the server holds", async () => {
    // Source of the bound: MODBUS Application Protocol V1.1b3, 6.3: 125 registers a request.
    expect(readsOfAll(driver)).toHaveLength(Math.ceil(REGISTERS / 125));
    const expected = Object.fromEntries(Array.from({ length: REGISTERS }, (_, register) => [keyOf(register), registerAtStart(register)]));
    await withServer((terminal) =>
      withSession(driver, (options) => connectSerial(terminal, options), async ({ session, identity }) => {
        expect(identity).toMatchObject({ maker: "Testbench", model: "R200" });
        const whole = await session.readWhole();
        expect(whole).toMatchObject({ ok: true, value: { values: expected, unreadable: [] } });
      }),
    );
  });

  test("takes one register and a stretch of them, and refuses what it does not have by the exception's name", async () => {
    const beyond = compileDriver({
      ...registerDevice,
      settings: registerDevice.settings.map((setting) =>
        setting.key === keyOf(REGISTERS - 1) && setting.wire.kind === "modbus" ? { ...setting, wire: { ...setting.wire, field: { ...setting.wire.field, register: 300 } } } : setting),
    });
    if (!beyond.ok) throw new Error(JSON.stringify(beyond.error));
    await withServer((terminal) =>
      withSession(beyond.value, (options) => connectSerial(terminal, options), async ({ session }) => {
        const stretch = Array.from({ length: 123 }, (_, index) => ({ key: keyOf(20 + index), value: 65_535 - index }));
        expect(await session.write([{ key: keyOf(3), value: 512 }])).toEqual({ ok: true, value: { outcome: "acknowledged" } });
        expect(await session.write(stretch)).toEqual({ ok: true, value: { outcome: "acknowledged" } });
        const found = await session.read([keyOf(2), keyOf(3), ...stretch.map(({ key }) => key)]);
        expect(found).toEqual({ ok: true, value: Object.fromEntries([[keyOf(2), registerAtStart(2)], [keyOf(3), 512], ...stretch.map(({ key, value }) => [key, value])]) });
        // Source: MODBUS Application Protocol V1.1b3, chapter 7: exception 02.
        expect(await session.read([keyOf(REGISTERS - 1)])).toMatchObject({ ok: false, error: { code: "refused", message: expect.stringContaining("illegal data address") as string } });
      }),
    );
  });

  test("is asked for each register once", () => {
    // By hand, MODBUS Application Protocol V1.1b3, 6.3: unit, function 3, first register, count, two bytes each.
    const asked = readsOfAll(driver).flatMap(({ bytes }) => {
      const word = (at: number) => (bytes[at] ?? 0) * 256 + (bytes[at + 1] ?? 0);
      expect([bytes[0], bytes[1]]).toEqual([9, 3]);
      return Array.from({ length: word(4) }, (_, index) => word(2) + index);
    });
    expect(asked).toEqual(Array.from({ length: REGISTERS }, (_, register) => register));
  });
});
