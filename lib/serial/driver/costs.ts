import { characterMs } from "@/lib/serial/protocols/character-time";
import type { NativeValues, NativeWrite } from "@/lib/serial/native";
import type { RasterTiming } from "@/lib/timing/raster";
import type { CompiledDriver, WireRequest } from "./compiled";
import { rasterToFields } from "./raster-fields";

/** What something costs on the line: characters both ways, and time. */
export type WireCost = { readonly bytes: number; readonly seconds: number };

/** Request, work and reply of one exchange in ms, without what runs beside them. */
function parts(driver: CompiledDriver, request: WireRequest): { readonly out: number; readonly work: number; readonly back: number } {
  const perCharacter = characterMs(driver.definition.transport);
  return { out: request.bytes.length * perCharacter, work: driver.definition.pace.workMs + request.extraMs, back: request.replyBytes * perCharacter };
}

function costOf(driver: CompiledDriver, requests: readonly (WireRequest | null)[]): WireCost {
  let bytes = 0;
  let ms = 0;
  for (const request of requests) {
    if (!request) continue;
    const { out, work, back } = parts(driver, request);
    bytes += request.bytes.length + request.replyBytes;
    ms += driver.codec.silenceMs + driver.definition.pace.gapMs + out + work + driver.codec.silenceMs + back;
  }
  return { bytes, seconds: ms / 1000 };
}

/** One write request and the read that verifies it. Throws where the driver cannot write these in one request. */
export function writeCost(driver: CompiledDriver, writes: readonly NativeWrite[]): WireCost {
  const request = driver.codec.planWrite(writes);
  if (!request.ok) throw new Error(request.error);
  const values = Object.fromEntries(writes.map(({ key, value }) => [key, value]));
  return costOf(driver, [request.value, ...driver.codec.planReads(writes.map((write) => write.key), values)]);
}

/**
 * Making a slot active, and reading which one is and, where timing takes effect on recall, the raster that is out.
 *
 * @param rasterAfter what will be out then
 */
export function recallCost(driver: CompiledDriver, slot: number, rasterAfter: RasterTiming | null): WireCost {
  const { codec, definition } = driver;
  const raster = definition.timingTakesEffect === "recall" ? codec.planStatus("rasterOut", rasterToFields(driver, rasterAfter)) : null;
  return costOf(driver, [codec.planAction("recall", { slot }), codec.planStatus("activeSlot", { slot }), raster]);
}

/** Muting the output, or letting it out again. It is not read back. */
export function muteCost(driver: CompiledDriver, on: boolean): WireCost {
  return costOf(driver, [driver.codec.planAction(on ? "muteOn" : "muteOff", {})]);
}

/** Storing working memory. */
export function commitCost(driver: CompiledDriver): WireCost {
  return costOf(driver, [driver.codec.planAction("commit", {})]);
}

/** Reading everything once: settings, and the few states that stand around them. */
export function wholeReadCost(driver: CompiledDriver, values?: NativeValues): WireCost {
  const reads = readsOfAll(driver, values);
  const states = (["bootCount", "committed", "rasterOut", "activeSlot", "bootCount"] as const).map((name) => driver.codec.planStatus(name));
  return { bytes: costOf(driver, [...reads, ...states]).bytes, seconds: wireLimitMs(driver, values) / 1000 + costOf(driver, states).seconds };
}

/** A whole read is planned once for each driver: a run makes several. */
const wholeReads = new WeakMap<CompiledDriver, readonly WireRequest[]>();

/** The cheapest set of requests that reads every setting once. */
export function readsOfAll(driver: CompiledDriver, values?: NativeValues): readonly WireRequest[] {
  const plan = () => driver.codec.planReads(driver.settings.filter((setting) => setting.readable).map((setting) => setting.key), values);
  if (values !== undefined) return plan();
  const requests = wholeReads.get(driver) ?? plan();
  wholeReads.set(driver, requests);
  return requests;
}

/**
 * The least time in which every setting can be read once, from the first request's first byte to the last reply's last byte.
 *
 * One at a time: requests, work, replies and the silences that the protocol demands. With k in flight: whatever is the
 * bottleneck of line out, device and line back, and the three together shared among k.
 * @param values fix the length of replies; a new device's by default
 * @returns ms
 */
export function wireLimitMs(driver: CompiledDriver, values?: NativeValues): number {
  const requests = readsOfAll(driver, values);
  if (requests.length === 0) return 0;
  const each = requests.map((request) => parts(driver, request));
  const sum = (name: "out" | "work" | "back") => each.reduce((total, part) => total + part[name], 0);
  const least = (name: "out" | "work" | "back") => Math.min(...each.map((part) => part[name]));
  const { inFlight, gapMs } = driver.definition.pace;
  const { silenceMs } = driver.codec;
  const together = sum("out") + sum("work") + sum("back");
  // The silence before a reply and the device's work are told apart on purpose: the one does not hide in the other.
  if (inFlight === 1) return together + requests.length * silenceMs + (requests.length - 1) * (silenceMs + gapMs);
  return Math.max(
    sum("out") + least("work") + least("back"),
    sum("work") + least("out") + least("back"),
    sum("back") + least("out") + least("work"),
    together / inFlight,
  );
}
