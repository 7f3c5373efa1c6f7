import { parseArgs } from "node:util";
import { compileDriver } from "@/lib/serial/driver/compile";
import { findShippedDriver, shippedDrivers } from "@/lib/serial/drivers/shipped";
import { createDeviceModel } from "@/lib/serial/simulator/device-model";
import { createWiredDevice } from "@/lib/serial/simulator/wired-device";
import { createPreciseClock } from "./sim/precise-clock";
import type { Served, ServedDevice } from "./sim/served-device";
import { servePty } from "./sim/serve-pty";
import { parseAddress, serveTcp } from "./sim/serve-tcp";

/* A simulated device outside the browser, which keeps its memory over connections for as long as this runs. */

const USAGE = `npm run sim -- --driver SLUG (--tcp HOST:PORT | --pty PATH) [--baud real|none]

  --driver  ${shippedDrivers.map(({ slug }) => slug).join(", ")}
  --tcp     raw bytes over TCP; port 0 takes a free one
  --pty     a pseudo-terminal of this name, through socat
  --baud    real: bytes take the time of the line (the default); none: they are there at once`;

type Wanted = { readonly driver: string; readonly tcp?: string; readonly pty?: string; readonly baud: "real" | "none" };

function parse() {
  const text = { type: "string" } as const;
  return parseArgs({ options: { driver: text, tcp: text, pty: text, baud: { type: "string", default: "real" } } })
    .values;
}

function readArguments(): Wanted | string {
  let values: ReturnType<typeof parse>;
  try {
    values = parse();
  } catch (error) {
    return error instanceof Error ? error.message : String(error);
  }
  const { driver, tcp, pty, baud } = values;
  if (driver === undefined) return "Say which device: --driver.";
  if ((tcp === undefined) === (pty === undefined)) return "Say where: either --tcp or --pty.";
  if (baud !== "real" && baud !== "none") return "--baud is real or none.";
  return { driver, tcp, pty, baud };
}

function makeDevice({ driver: slug, baud }: Wanted): ServedDevice | string {
  const definition = findShippedDriver(slug);
  if (!definition) return `No driver is called ${slug}.`;
  const compiled = compileDriver(definition);
  if (!compiled.ok) throw new Error(`The driver ${slug} does not compile: ${JSON.stringify(compiled.error)}`);
  const clock = createPreciseClock();
  const wire = createWiredDevice({
    model: createDeviceModel(compiled.value, { clock }),
    transport: definition.transport,
    clock,
    pacing: baud === "real" ? "wire" : "none",
    onBytes: (bytes) => device.onBytes(bytes),
  });
  const device: ServedDevice = { wire, onBytes: () => undefined };
  return device;
}

function serve(device: ServedDevice, wanted: Wanted): Promise<Served> | string {
  if (wanted.pty !== undefined) return servePty(device, wanted.pty, giveUp);
  const address = parseAddress(wanted.tcp ?? "");
  return address ? serveTcp(device, address.host, address.port) : `${wanted.tcp} is not HOST:PORT.`;
}

function giveUp(why: string): never {
  console.error(why);
  process.exit(1);
}

function misused(why: string): never {
  console.error(`${why}\n\n${USAGE}`);
  process.exit(2);
}

async function main(): Promise<void> {
  const wanted = readArguments();
  if (typeof wanted === "string") misused(wanted);
  const device = makeDevice(wanted);
  if (typeof device === "string") misused(device);
  const serving = serve(device, wanted);
  if (typeof serving === "string") misused(serving);
  const served = await serving;
  console.log(`${wanted.driver} listens at ${served.where}`);
  let isStopping = false;
  const stop = (): void => {
    if (isStopping) return;
    isStopping = true;
    void served.stop().then(() => process.exit(0));
  };
  process.on("SIGINT", stop);
  process.on("SIGTERM", stop);
}

main().catch((error: unknown) => giveUp(error instanceof Error ? error.message : String(error)));
