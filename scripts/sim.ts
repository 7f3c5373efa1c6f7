import { createTimeline } from "@/lib/serial/clock/timeline";
import { compileDriver } from "@/lib/serial/driver/compile";
import { createDeviceModel } from "@/lib/serial/simulator/device-model";
import { createWiredDevice } from "@/lib/serial/simulator/wired-device";
import { readArguments, USAGE } from "./sim/arguments";
import type { Wanted } from "./sim/arguments";
import { createPreciseClock } from "./sim/precise-clock";
import type { Served, ServedDevice } from "./sim/served-device";
import { servePty } from "./sim/serve-pty";
import { serveTcp } from "./sim/serve-tcp";

/* A simulated device outside the browser, which keeps its memory over connections for as long as this runs. */

/** Some six bytes at 115 200 baud: fewer writes to the stream, for a reply that is half a ms late at most. */
const GRAIN_MS = 0.5;

function makeDevice({ definition, pacing, serialNumber }: Wanted): ServedDevice {
  const compiled = compileDriver(definition);
  if (!compiled.ok)
    throw new Error(`The driver ${definition.slug} does not compile: ${JSON.stringify(compiled.error)}`);
  // Late by a little at each stage of a request, on a busy machine by more: this keeps it from adding up.
  const clock = createTimeline(createPreciseClock());
  const wire = createWiredDevice({
    model: createDeviceModel(compiled.value, { clock, serialNumber }),
    transport: definition.transport,
    clock,
    pacing,
    grainMs: GRAIN_MS,
    onBytes: (bytes) => device.onBytes(bytes),
  });
  const device: ServedDevice = { wire, onBytes: () => undefined };
  return device;
}

function serve(device: ServedDevice, { where }: Wanted): Promise<Served> {
  return where.kind === "pty" ? servePty(device, where.link, giveUp) : serveTcp(device, where.host, where.port);
}

function giveUp(why: string): never {
  console.error(why);
  process.exit(1);
}

async function main(): Promise<void> {
  const wanted = readArguments(process.argv.slice(2));
  if (!wanted.ok) {
    console.error(`${wanted.error}\n\n${USAGE}`);
    process.exit(2);
  }
  const served = await serve(makeDevice(wanted.value), wanted.value);
  let isStopping = false;
  const stop = (): void => {
    if (isStopping) return;
    isStopping = true;
    void served.stop().then(() => process.exit(0));
  };
  process.on("SIGINT", stop);
  process.on("SIGTERM", stop);
  // Said last: whoever waits for it may end this at once.
  console.log(`${wanted.value.definition.slug} listens at ${served.where}`);
}

main().catch((error: unknown) => giveUp(error instanceof Error ? error.message : String(error)));
