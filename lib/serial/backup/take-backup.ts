import { fail, ok, type Result } from "@/lib/result";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { rasterOfSlot } from "@/lib/serial/plan/output-raster";
import type { DeviceSession, ReadProgress, RequestError, WholeRead } from "@/lib/serial/session/types";
import { documentFromNative } from "./document";
import type { BackupContent, TakenBackup } from "./types";

/**
 * The content of a backup made from a whole read.
 *
 * @param firmware the version that ran when it was read: it stands in the document, so that a plan can be checked against it
 */
export function backupContent(driver: CompiledDriver, { values, unreadable }: Pick<WholeRead, "values" | "unreadable">, firmware: string): BackupContent {
  const { slug, version } = driver.definition;
  return { driver: { slug, version }, values, unreadable, document: { ...documentFromNative(driver, values), madeFor: { driver: { slug, firmware } } } };
}

/**
 * Reads a device whole and makes a backup of it. The session must be ready.
 * Errors: what the line says; nothing half read is kept.
 */
export async function takeBackup(
  session: DeviceSession, driver: CompiledDriver,
  options: { readonly onProgress?: (progress: ReadProgress) => void; readonly signal?: AbortSignal } = {},
): Promise<Result<TakenBackup, RequestError>> {
  const { state } = session;
  if (state.name !== "ready") return fail({ code: "lost", message: "The device has not said who it is." });
  const read = await session.readWhole(options);
  if (!read.ok) return read;
  const arriving = driver.definition.status.arriving ? await session.arriving(options.signal) : null;
  if (arriving && !arriving.ok) return arriving;
  const { values, activeSlot } = read.value;
  const rasterOut = read.value.rasterOut === undefined ? rasterOfSlot(driver, new Map(Object.entries(values)), activeSlot) : read.value.rasterOut;
  return ok({ content: backupContent(driver, read.value, state.identity.firmware), identity: state.identity, activeSlot, arriving: arriving?.value.format ?? null, rasterOut });
}
