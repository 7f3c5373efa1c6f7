import { fail, ok, type Result } from "@/lib/result";
import type { Clock } from "@/lib/serial/clock";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { readsOfAll, wireLimitMs } from "@/lib/serial/driver/costs";
import type { Exchanger } from "./exchanger";
import { sendAll } from "./requests";
import type { DeviceSession, ReadProgress, RequestError, WholeRead } from "./types";

/** A device that restarts in each of so many reads in a row is not read. */
const MAX_READS = 3;
/** Progress is judged by the pace so far once so many settings have come. */
const PACE_AFTER = 16;

type Asked = Pick<DeviceSession, "bootCount" | "committed" | "rasterOut" | "activeSlot">;

export type ReadWholeParts = {
  readonly driver: CompiledDriver;
  readonly clock: Clock;
  readonly exchanger: Exchanger;
  readonly asked: Asked;
  readonly onProgress: ((progress: ReadProgress) => void) | undefined;
  readonly signal: AbortSignal | undefined;
};

/** An answer, or undefined where the driver has no such query. */
async function askIf<T>(has: boolean, ask: () => Promise<Result<T, RequestError>>): Promise<Result<T | undefined, RequestError>> {
  return has ? ask() : ok(undefined);
}

async function readValues({ driver, clock, exchanger, onProgress, signal }: ReadWholeParts) {
  const requests = readsOfAll(driver);
  const total = requests.reduce((sum, request) => sum + request.keys.length, 0);
  const expectedMs = wireLimitMs(driver);
  const startMs = clock.nowMs();
  let done = 0;
  const tell = () => {
    const share = done / total;
    const leftMs = done < PACE_AFTER ? expectedMs * (1 - share) : ((clock.nowMs() - startMs) / share) * (1 - share);
    onProgress?.({ done, total, secondsLeft: leftMs / 1000 });
  };
  tell();
  return sendAll(driver, exchanger, requests, signal, (request) => {
    done += request.keys.length;
    tell();
  });
}

/** One pass. `moved`: the device restarted while it was read. */
async function readOnce(parts: ReadWholeParts): Promise<Result<WholeRead | "moved", RequestError>> {
  const { driver, asked, signal } = parts;
  const { status } = driver.definition;
  const before = await askIf(status.bootCount !== undefined, () => asked.bootCount(signal));
  if (!before.ok) return before;
  // Asked before the values: only a later read, all new, proves what was stored.
  const committed = await askIf(status.committed !== undefined, () => asked.committed(signal));
  if (!committed.ok) return committed;
  const values = await readValues(parts);
  if (!values.ok) return values;
  const rasterOut = await askIf(status.rasterOut !== undefined, () => asked.rasterOut(signal));
  if (!rasterOut.ok) return rasterOut;
  const activeSlot = await asked.activeSlot(signal);
  if (!activeSlot.ok) return activeSlot;
  const after = await askIf(status.bootCount !== undefined, () => asked.bootCount(signal));
  if (!after.ok) return after;
  if (before.value !== after.value) return ok("moved");
  return ok({
    values: values.value, unreadable: driver.settings.filter((setting) => !setting.readable).map((setting) => setting.key),
    activeSlot: activeSlot.value, rasterOut: rasterOut.value, bootCount: after.value, committed: committed.value,
  });
}

/**
 * Reads everything once: boot count, whether all is stored, every setting, the raster that is out, the active slot, boot count again.
 * Made again where the boot count moved, `MAX_READS` times in all.
 */
export async function readWhole(parts: ReadWholeParts): Promise<Result<WholeRead, RequestError>> {
  for (let pass = 0; pass < MAX_READS; pass += 1) {
    const read = await readOnce(parts);
    if (!read.ok) return read;
    if (read.value !== "moved") return ok(read.value);
  }
  return fail({ code: "busy", message: `The device restarted in each of ${MAX_READS} reads.` });
}
