import { setFlagsFromString } from "node:v8";
import { runInNewContext } from "node:vm";
import { createVirtualClock } from "@/lib/serial/clock/virtual-clock";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { shippedDrivers } from "@/lib/serial/drivers/shipped";
import { createDeviceModel } from "@/lib/serial/simulator/device-model";
import { createWireLog } from "@/lib/serial/wire-log";
import { compiled } from "@/tests/unit/serial/simulated-rig";
import type { Measurement } from "./measure";

const EXCHANGES = 1_000_000;
/** By then the log's ring is full several times over. */
const FULL_AT = 100_000;
/** What memory may differ by between two looks at a heap that does not grow. */
const FLAT_MIB = 1;
const MIB = 1024 * 1024;

setFlagsFromString("--expose-gc");
const collect = runInNewContext("gc") as () => void;

function heapMib(): number {
  collect();
  collect();
  return process.memoryUsage().heapUsed / MIB;
}

/** One request of the driver, and the bytes that a device answers with. */
async function exchangeOf(driver: CompiledDriver): Promise<{ readonly request: Uint8Array; readonly reply: Uint8Array }> {
  const clock = createVirtualClock();
  const device = createDeviceModel(driver, { clock });
  const said: number[] = [];
  device.attach((bytes) => said.push(...bytes));
  const request = driver.codec.planStatus("activeSlot");
  if (!request) throw new Error(`${driver.definition.model} has no question`);
  device.receive(request.bytes);
  await clock.advance(1000);
  return { request: request.bytes, reply: Uint8Array.from(said) };
}

/** What the wire log and the decoder hold more after 10⁶ exchanges than when the log was full, for each protocol. */
export async function measureMemory(): Promise<readonly Measurement[]> {
  const measured: Measurement[] = [];
  for (const definition of shippedDrivers) {
    const driver = compiled(definition);
    const { request, reply } = await exchangeOf(driver);
    const wireLog = createWireLog({ clock: createVirtualClock() });
    const decoder = driver.codec.createDecoder();
    let before = NaN;
    let frames = 0;
    for (let exchange = 0; exchange < EXCHANGES; exchange += 1) {
      if (exchange === FULL_AT) before = heapMib();
      const number = wireLog.out(request);
      // A byte that no frame is made of goes before each hundredth reply: what is held back must not pile up.
      const bytes = exchange % 100 === 0 ? Uint8Array.from([0, ...reply]) : reply;
      for (const frame of decoder.push(bytes)) {
        wireLog.in(frame.bytes, { exchange: number });
        frames += frame.kind === "frame" ? 1 : 0;
      }
      if (exchange % 100 === 0) decoder.flush();
    }
    if (frames < EXCHANGES * 0.98) throw new Error(`${definition.model}: ${frames} frames of ${EXCHANGES}`);
    const grown = Math.max(0, heapMib() - before);
    measured.push({ name: `${definition.model}: growth of log and decoder, 10⁵ to 10⁶ exchanges`, value: grown, unit: "MiB", limit: FLAT_MIB });
  }
  return measured;
}
