import "server-only";
import type { Db } from "@/db/client";
import type { Asker } from "@/db/queries/askers";
import { readDefinition } from "@/db/queries/drivers";
import type { BackupContent } from "@/lib/serial/backup/types";
import { backupContent } from "@/lib/serial/backup/take-backup";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import { parseDefinition } from "@/lib/serial/driver/parse-definition";
import { findShippedDriver } from "@/lib/serial/drivers/shipped";
import type { NativeKey, NativeValues } from "@/lib/serial/native";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";
import { fail, ok } from "@/lib/result";
import type { PathMessage, Result } from "@/lib/result";

export type DriverRef = { readonly slug: string; readonly version: string };

/**
 * The driver definition that a backup or plan names: one that came with the program, or one that was published here.
 * @param asker a maintainer's own drafts count too
 * Error: "no-driver" when this version is not here, or does not compile.
 */
export async function findDriver(
  db: Db,
  ref: DriverRef,
  asker: Asker = null,
): Promise<Result<DriverDefinition, "no-driver">> {
  const shipped = findShippedDriver(ref.slug);
  if (shipped?.version === ref.version) return ok(shipped);
  const stored = await readDefinition(db, asker, ref);
  const parsed = stored.ok ? parseDefinition(stored.value.definition) : stored;
  return parsed.ok ? ok(parsed.value.definition) : fail("no-driver");
}

/** The most complaints about one read. */
const maxProblems = 50;

/**
 * The content of a backup from what a device said; the neutral document is made here.
 *
 * A value beyond the driver's range is kept: it is what the device holds.
 * Errors: settings that this driver does not have, or that were neither read nor named as unreadable, by key.
 */
export function contentFromRead(
  definition: DriverDefinition,
  {
    values,
    unreadable,
    firmware,
  }: { readonly values: NativeValues; readonly unreadable: readonly NativeKey[]; readonly firmware: string },
): Result<BackupContent, PathMessage[]> {
  const driver = compiledDriver(definition);
  const foreign = [...Object.keys(values), ...unreadable].filter((key) => !driver.byKey.has(key));
  const told = new Set([...Object.keys(values), ...unreadable]);
  const missing = driver.settings.filter(({ key }) => !told.has(key)).map(({ key }) => key);
  const problems = [
    ...foreign.map((path) => ({ path, message: "The driver has no such setting." })),
    ...missing.map((path) => ({ path, message: "Was neither read nor named as unreadable." })),
  ];
  return problems.length > 0
    ? fail(problems.slice(0, maxProblems))
    : ok(backupContent(driver, { values, unreadable }, firmware));
}

/** Whether a device of this driver has such a slot. */
export function hasSlot({ slots }: DriverDefinition, number: number): boolean {
  return number >= slots.first && number < slots.first + slots.count;
}
