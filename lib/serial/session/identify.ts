import { fail, ok, type Result } from "@/lib/result";
import type { CompiledDriver, Fields } from "@/lib/serial/driver/compiled";
import type { Exchanger } from "./exchanger";
import type { DeviceIdentity, RequestError } from "./types";

/** Asks until two answers in a row agree: another program may have talked into the line. */
const MAX_ASKS = 5;

function identityOf(fields: Fields): DeviceIdentity {
  const serial = String(fields["serial"] ?? "");
  return {
    maker: String(fields["maker"] ?? ""), model: String(fields["model"] ?? ""), firmware: String(fields["firmware"] ?? ""),
    ...(serial === "" || serial === "0" ? {} : { serialNumber: serial }),
  };
}

/** The same maker, model, serial number and firmware. */
export function sameIdentity(a: DeviceIdentity, b: DeviceIdentity): boolean {
  return a.maker === b.maker && a.model === b.model && a.serialNumber === b.serialNumber && a.firmware === b.firmware;
}

/**
 * Asks a device who it is, twice.
 * Errors: `unsupported` where another model answers; what the line says otherwise.
 */
export async function askIdentity(driver: CompiledDriver, exchanger: Exchanger, signal?: AbortSignal): Promise<Result<DeviceIdentity, RequestError>> {
  const { maker, model } = driver.definition;
  let before: DeviceIdentity | null = null;
  for (let ask = 0; ask < MAX_ASKS; ask += 1) {
    const request = driver.codec.planStatus("identity");
    if (!request) return fail({ code: "unsupported", message: "This device's driver does not say how to ask who it is." });
    const result = await exchanger.submit(request, signal);
    if (!result.ok) return result;
    const identity = identityOf(result.value.fields);
    if (before && sameIdentity(before, identity)) {
      if (identity.maker === maker && identity.model === model) return ok(identity);
      return fail({ code: "unsupported", message: `${identity.maker} ${identity.model} answered, not ${maker} ${model}.` });
    }
    before = identity;
  }
  return fail({ code: "malformed", message: `The device said something else each of ${MAX_ASKS} times that it was asked who it is.` });
}
