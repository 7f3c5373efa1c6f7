import { execFile } from "node:child_process";
import { promisify } from "node:util";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { placesOf } from "@/lib/serial/protocols/modbus/places";
import { MAX_READ_REGISTERS } from "@/lib/serial/protocols/modbus/frames";
import { bestSpans } from "@/lib/serial/protocols/modbus/registers";
import { createPreciseClock } from "@/scripts/sim/precise-clock";
import { withProgram } from "@/tests/peers/serial/compile-c";
import { compiled, withSession } from "@/tests/peers/serial/live-session";
import { connectSerial } from "@/tests/peers/serial/open-duplex";
import { withPty } from "@/tests/peers/serial/sim-process";
import { timeOfSettings } from "./backup-pty";
import type { Measurement } from "./measure";

const run = promisify(execFile);

/** A machine that is busy with something else for a moment says nothing of either program: the best of these counts. */
const PASSES = 8;
/** So many times what the C program takes. */
const AT_MOST = 1.02;
/** One more request costs more than any number of registers: the fewest requests. */
const FEWEST = 100_000;

/** Stretches of holding registers that hold every setting of the device, as few as its own rule about gaps allows. */
function fewestSpans(driver: CompiledDriver): readonly string[] {
  const { protocol } = driver.definition;
  const places = placesOf(driver.definition, driver.settings);
  if (protocol.kind !== "modbus-rtu" || !places.ok) throw new Error("Not a Modbus device");
  const placed = driver.settings.flatMap(({ key, readable }) => (readable ? (places.value.get(key) ?? []) : []));
  const spans = bestSpans(placed, { overheadRegisters: FEWEST, maxGap: protocol.maxReadGap, most: MAX_READ_REGISTERS });
  return spans.flatMap(({ first, count }) => [String(first), String(count)]);
}

/** The least time of a C program on libmodbus that reads the same registers from the same device. @returns ms */
async function timeOfLibmodbus(terminal: string, driver: CompiledDriver): Promise<number> {
  const { transport, protocol } = driver.definition;
  const unit = protocol.kind === "modbus-rtu" ? protocol.unit : 0;
  const args = [terminal, String(transport.baudRate), String(unit), String(PASSES), ...fewestSpans(driver)];
  const { stdout } = await withProgram("read-spans", (program) => run(program, args, { timeout: 120_000 }));
  const times = stdout.split("\n").slice(0, PASSES).map(Number);
  return Math.min(...times);
}

/** Backup of a Brackenrow that is paced as its wire, over a pseudo-terminal, beside a C program on libmodbus in the same run. */
export async function measureBackupBesideLibmodbus(): Promise<readonly Measurement[]> {
  const driver = compiled("brackenrow-4r");
  return withPty("brackenrow-4r", async (terminal) => {
    const theirs = await timeOfLibmodbus(terminal, driver);
    const ours = await withSession(driver, (options) => connectSerial(terminal, options), async ({ session }) => {
      const times: number[] = [];
      for (let pass = 0; pass < PASSES; pass += 1) times.push(await timeOfSettings(session, driver));
      return Math.min(...times);
      // A timer of Node comes up to 2 ms late, a sleep of the C program does not: both get a clock that keeps the silence to the tenth.
    }, createPreciseClock());
    return [{ name: "Brackenrow backup beside a C program on libmodbus, real time", value: ours, unit: "ms", limit: AT_MOST * theirs }];
  });
}
