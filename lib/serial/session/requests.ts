import { fail, ok, type Result } from "@/lib/result";
import type { CompiledDriver, Fields, WireRequest } from "@/lib/serial/driver/compiled";
import type { ActionName, StatusName } from "@/lib/serial/driver/definition";
import { toNeutral } from "@/lib/serial/driver/neutral";
import { rasterFromFields } from "@/lib/serial/driver/raster-fields";
import type { NativeKey, NativeValue, NativeValues, NativeWrite } from "@/lib/serial/native";
import type { Exchanger, ExchangeResult } from "./exchanger";
import type { Arriving, DeviceSession, RequestError, WriteOutcome } from "./types";

type Requests = Pick<
  DeviceSession,
  "read" | "write" | "recall" | "commit" | "mute" | "timer" | "activeSlot" | "rasterOut" | "bootCount" | "committed" | "arriving"
>;

const unsupported = (what: string): { ok: false; error: RequestError } => fail({ code: "unsupported", message: `This device's driver has no word for ${what}.` });
const malformed = (message: string): { ok: false; error: RequestError } => fail({ code: "malformed", message });
const ACKNOWLEDGED: WriteOutcome = { outcome: "acknowledged" };

/** What is known of a request that changes something, once it ended. A lost reply is unknown, never "failed". */
function outcomeOf(result: ExchangeResult): Result<WriteOutcome, RequestError> {
  if (result.ok) return ok(ACKNOWLEDGED);
  const { code, message } = result.error;
  return code === "timeout" || code === "malformed" ? ok({ outcome: "unknown", message }) : result;
}

function arrivingOf(driver: CompiledDriver, fields: Fields): Arriving | null {
  const number = (name: string) => (typeof fields[name] === "number" ? fields[name] : null);
  const [activePx, activeLines, milliHz] = [number("activePx"), number("activeLines"), number("fieldRateMilliHz")];
  const setting = driver.byKey.get(`slots[${driver.definition.slots.first}].input`)?.value;
  const native = fields["input"];
  if (activePx === null || activeLines === null || milliHz === null || native === undefined) return null;
  const input = String((setting && toNeutral(setting, native)) ?? native);
  if (activePx === 0) return { input, format: null, locked: false };
  return { input, format: { activePx, activeLines, interlaced: fields["interlaced"] === 1, fieldRateHz: milliHz / 1000 }, locked: fields["locked"] === 1 };
}

/**
 * Sends requests with as many under way as the line takes, and one more that waits at hand.
 * @param onReply called in the order of the replies
 */
export async function sendAll(
  driver: CompiledDriver, exchanger: Exchanger, requests: readonly WireRequest[], signal: AbortSignal | undefined, onReply?: (request: WireRequest) => void,
): Promise<Result<NativeValues, RequestError>> {
  const values: Record<NativeKey, NativeValue> = {};
  let next = 0;
  let failed: RequestError | null = null;
  async function worker(): Promise<void> {
    for (let request = requests[next]; request && !failed; request = requests[next]) {
      next += 1;
      const result = await exchanger.submit(request, signal);
      if (!result.ok) {
        failed ??= result.error;
        return;
      }
      Object.assign(values, result.value.values);
      onReply?.(request);
    }
  }
  await Promise.all(Array.from({ length: driver.definition.pace.inFlight + 1 }, worker));
  return failed ? fail(failed) : ok(values);
}

/** The requests of a session, each in terms of the driver's words. */
export function createRequests(driver: CompiledDriver, exchanger: Exchanger): Requests {
  const { codec, definition } = driver;

  async function status(name: StatusName, what: string, signal?: AbortSignal): Promise<Result<Fields, RequestError>> {
    const request = codec.planStatus(name);
    if (!request) return unsupported(what);
    const result = await exchanger.submit(request, signal);
    return result.ok ? ok(result.value.fields) : result;
  }

  async function numberStatus(name: StatusName, field: string, what: string, signal?: AbortSignal): Promise<Result<number, RequestError>> {
    const fields = await status(name, what, signal);
    if (!fields.ok) return fields;
    const value = fields.value[field];
    return typeof value === "number" ? ok(value) : malformed(`The answer about ${what} has no number.`);
  }

  async function act(name: ActionName, fields: Fields, what: string, signal?: AbortSignal): Promise<ExchangeResult> {
    const request = codec.planAction(name, fields);
    return request ? exchanger.submit(request, signal) : unsupported(what);
  }

  return {
    async read(keys, signal) {
      const missing = keys.find((key) => !driver.byKey.get(key)?.readable);
      return missing === undefined ? sendAll(driver, exchanger, codec.planReads(keys), signal) : unsupported(`reading ${missing}`);
    },
    async write(writes: readonly NativeWrite[], signal) {
      const request = codec.planWrite(writes);
      if (!request.ok) return fail({ code: "unsupported", message: request.error });
      const result = await exchanger.submit(request.value, signal);
      const outcome = outcomeOf(result);
      if (!result.ok) return outcome;
      const other = writes.find(({ key, value }) => (result.value.values[key] ?? value) !== value);
      if (!other) return outcome;
      // The answer speaks of another value: an earlier reply come late, or a device that clamps. The line is cleared before the read-back.
      exchanger.drain(definition.pace.replyTimeoutMs, definition.pace.replyTimeoutMs);
      return ok({ outcome: "unknown", message: `The device answered ${String(result.value.values[other.key])} for ${other.key}.` });
    },
    recall: async (slot, signal) => outcomeOf(await act("recall", { slot }, "making a slot active", signal)),
    commit: async (signal) => outcomeOf(await act("commit", {}, "storing", signal)),
    mute: async (on, signal) => outcomeOf(await act(on ? "muteOn" : "muteOff", {}, "muting", signal)),
    async timer(which, seconds, signal) {
      const names = { arm: "armTimer", extend: "extendTimer", confirm: "confirmTimer", disarm: "disarmTimer" } as const;
      const fields: Fields = seconds === undefined ? {} : { seconds: Math.ceil(seconds) };
      const result = await act(names[which], fields, "a device timer", signal);
      if (result.ok) return ok("done");
      return result.error.code === "refused" ? ok("refused") : result;
    },
    activeSlot: (signal) => numberStatus("activeSlot", "slot", "the active slot", signal),
    bootCount: (signal) => numberStatus("bootCount", "count", "the count of starts", signal),
    async committed(signal) {
      const value = await numberStatus("committed", "committed", "whether all is stored", signal);
      return value.ok ? ok(value.value === 1) : value;
    },
    async rasterOut(signal) {
      const fields = await status("rasterOut", "the raster that is out", signal);
      if (!fields.ok) return fields;
      const raster = rasterFromFields(driver, fields.value);
      return raster === undefined ? malformed("The answer about the raster that is out makes no raster.") : ok(raster);
    },
    async arriving(signal) {
      const fields = await status("arriving", "what arrives", signal);
      if (!fields.ok) return fields;
      const arriving = arrivingOf(driver, fields.value);
      return arriving ? ok(arriving) : malformed("The answer about what arrives makes no format.");
    },
  };
}
