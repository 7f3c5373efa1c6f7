import { parseArgs } from "node:util";
import { findShippedDriver, shippedDrivers } from "@/lib/serial/drivers/shipped";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import type { Result } from "@/lib/result";
import { fail, ok } from "@/lib/result";
import { parseAddress } from "./serve-tcp";

export const USAGE = `npm run sim -- --driver SLUG (--tcp HOST:PORT | --pty PATH) [--baud real|none] [--serial TEXT]

  --driver  ${shippedDrivers.map(({ slug }) => slug).join(", ")}
  --tcp     raw bytes over TCP; port 0 takes a free one
  --pty     a pseudo-terminal of this name, through socat
  --baud    real: bytes take the time of the line (the default); none: they are there at once
  --serial  the serial number that the device answers with`;

export type Wanted = {
  readonly definition: DriverDefinition;
  readonly where:
    | { readonly kind: "tcp"; readonly host: string; readonly port: number }
    | { readonly kind: "pty"; readonly link: string };
  readonly pacing: "wire" | "none";
  /** Absent: the model's first. */
  readonly serialNumber: string | undefined;
};

function parse(args: readonly string[]) {
  const text = { type: "string" } as const;
  const options = { driver: text, tcp: text, pty: text, serial: text, baud: { type: "string", default: "real" } } as const;
  return parseArgs({ args: [...args], options }).values;
}

/** Reads the command line. Errors: a sentence for the user. */
export function readArguments(args: readonly string[]): Result<Wanted, string> {
  let values: ReturnType<typeof parse>;
  try {
    values = parse(args);
  } catch (error) {
    return fail(error instanceof Error ? error.message : String(error));
  }
  const { driver, tcp, pty, baud, serial: serialNumber } = values;
  if (driver === undefined) return fail("Say which device: --driver.");
  const definition = findShippedDriver(driver);
  if (!definition) return fail(`No driver is called ${driver}.`);
  if (baud !== "real" && baud !== "none") return fail("--baud is real or none.");
  const pacing = baud === "real" ? "wire" : "none";
  if (tcp !== undefined && pty === undefined) {
    const address = parseAddress(tcp);
    return address ? ok({ definition, where: { kind: "tcp", ...address }, pacing, serialNumber }) : fail(`${tcp} is not HOST:PORT.`);
  }
  if (pty === undefined || tcp !== undefined) return fail("Say where: either --tcp or --pty.");
  return ok({ definition, where: { kind: "pty", link: pty }, pacing, serialNumber });
}
