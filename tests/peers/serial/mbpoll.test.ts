import { execFile } from "node:child_process";
import { describe, expect, test } from "vitest";
import type { NativeValue } from "@/lib/serial/native";
import type { SerialOpenOptions } from "@/lib/serial/port";
import type { DeviceSession } from "@/lib/serial/session/types";
import { compiled, withSession } from "./live-session";
import { connectSerial } from "./open-duplex";
import { withPty } from "./sim-process";

const driver = compiled("brackenrow-4r");
const { transport } = driver.definition;
const LINE = ["-m", "rtu", "-a", "17", "-b", String(transport.baudRate), "-P", transport.parity, "-0", "-1", "-o", "3"];

type Poll = { readonly type: "3" | "4" | "4:int"; readonly first: number; readonly count?: number; readonly write?: number };

/** Runs mbpoll once. Resolves with its words and its exit code. */
function mbpoll(terminal: string, { type, first, count = 1, write }: Poll): Promise<{ readonly said: string; readonly code: number }> {
  const about = ["-t", type, "-r", String(first), ...(type === "4:int" ? ["-B"] : []), ...(write === undefined ? ["-c", String(count)] : [])];
  return new Promise((resolve) => {
    execFile("mbpoll", [...LINE, ...about, terminal, ...(write === undefined ? [] : ["--", String(write)])], { timeout: 30_000 }, (error, stdout, stderr) => {
      resolve({ said: stdout + stderr, code: error ? 1 : 0 });
    });
  });
}

/** Registers as mbpoll prints them: `[100]: 	65534 (-2)`. */
function registersIn(said: string): number[] {
  return [...said.matchAll(/^\[\d+\]:\s+(\d+)/gmu)].map(([, value]) => Number(value));
}

/** Runs `body` with our session on the terminal, and waits until the terminal is let go of: two that read it would share its bytes. */
async function withOurs<T>(terminal: string, body: (session: DeviceSession) => Promise<T>): Promise<T> {
  let closed = Promise.resolve();
  const connect = async (options: SerialOpenOptions) => {
    const serial = await connectSerial(terminal, options);
    closed = new Promise((resolve) => void serial.on("close", resolve));
    return serial;
  };
  const result = await withSession(driver, connect, ({ session }) => body(session));
  await closed;
  return result;
}

/** Values that the session reads on the same terminal. */
function readOurs(terminal: string, keys: readonly string[]): Promise<Readonly<Record<string, NativeValue>>> {
  return withOurs(terminal, async (session) => {
    const read = await session.read(keys);
    if (!read.ok) throw new Error(read.error.message);
    return read.value;
  });
}

const position = "slots[1].placement.offsetPx";
const clock = "modes[1].timing.pixelClockHz";
const across = ["active", "frontPorch", "sync", "backPorch"].map((part) => `modes[1].timing.horizontal.${part}`);

describe("mbpoll, a client that knows nothing of us, on the simulated Brackenrow", () => {
  test("reads registers of one, two and many words as our session does", async () => {
    await withPty("brackenrow-4r", async (terminal) => {
      const ours = await readOurs(terminal, [position, clock, ...across]);
      expect(registersIn((await mbpoll(terminal, { type: "4", first: 110 })).said)).toEqual([ours[position]]);
      expect(registersIn((await mbpoll(terminal, { type: "4", first: 1003, count: 4 })).said)).toEqual(across.map((key) => ours[key]));
      expect(registersIn((await mbpoll(terminal, { type: "4:int", first: 1000 })).said)).toEqual([ours[clock]]);
      // The identity, two letters a register: "Brackenrow" begins with 0x4272.
      expect(registersIn((await mbpoll(terminal, { type: "3", first: 0 })).said)).toEqual([0x4272]);
    });
  });

  test("writes what our session then reads, and reads what our session has written", async () => {
    await withPty("brackenrow-4r", async (terminal) => {
      expect((await mbpoll(terminal, { type: "4", first: 110, write: 6 })).said).toContain("Written 1 references");
      expect(await readOurs(terminal, [position])).toEqual({ [position]: 6 });
      await withOurs(terminal, async (session) => {
        expect(await session.write([{ key: position, value: -2 }])).toEqual({ ok: true, value: { outcome: "acknowledged" } });
      });
      // Two's complement in a register.
      expect(registersIn((await mbpoll(terminal, { type: "4", first: 110 })).said)).toEqual([0xfffe]);
    });
  });

  test("hears the exceptions of Modbus by their names: no such register, a value out of range", async () => {
    await withPty("brackenrow-4r", async (terminal) => {
      const nowhere = await mbpoll(terminal, { type: "4", first: 5000 });
      expect(nowhere.said).toContain("Illegal data address");
      expect(nowhere.code).not.toBe(0);
      expect((await mbpoll(terminal, { type: "4", first: 110, write: 4000 })).said).toContain("Illegal data value");
      expect(registersIn((await mbpoll(terminal, { type: "4", first: 110 })).said)).toEqual([0]);
    });
  });
});
