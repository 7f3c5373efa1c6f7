import { and, desc, eq, isNull, sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { writeAudit } from "@/db/queries/audit";
import { changedValues } from "@/db/queries/changed-values";
import { pageFrom, readCursor } from "@/db/queries/paging";
import type { OwnedKey } from "@/db/queries/paging";
import { backup, backupContent } from "@/db/schema/backup";
import { device } from "@/db/schema/device";
import { plan } from "@/db/schema/plan";
import type { BackupDetail, BackupView } from "@/lib/contracts/backup";
import type { Page, PageQuery } from "@/lib/contracts/page";
import { hashValue } from "@/lib/profile/canonical";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";
import type { BackupContent } from "@/lib/serial/backup/types";
import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";

const columns = {
  id: backup.id,
  deviceId: backup.deviceId,
  name: backup.name,
  cause: backup.cause,
  takenAt: backup.takenAt,
  firmware: backup.firmware,
  activeSlot: backup.activeSlot,
  arriving: backup.arriving,
  rasterOut: backup.rasterOut,
  contentHash: backup.contentHash,
  version: backup.version,
  knownGood: sql<boolean>`coalesce(${device.knownGoodBackupId} = ${backup.id}, false)`,
  plans: sql<number>`(select count(*)::int from ${plan} p where p.backup_id = ${backup.id} or p.target_backup_id = ${backup.id})`,
  sortedBy: sql<string>`${backup.takenAt}::text`,
  previousHash: sql<string | null>`(
    select o.content_hash from ${backup} o
    where o.device_id = ${backup.deviceId} and o.deleted_at is null and (o.taken_at, o.id) < (${backup.takenAt}, ${backup.id})
    order by o.taken_at desc, o.id desc limit 1)`,
};

function selectBackups(db: Db) {
  return db
    .select(columns)
    .from(backup)
    .innerJoin(device, and(eq(device.id, backup.deviceId), isNull(device.deletedAt)));
}

type Row = Awaited<ReturnType<typeof selectBackups>>[number];

function viewOf(row: Row, changed: number | null): BackupView {
  const { sortedBy: _sortedBy, previousHash: _previousHash, takenAt, ...shown } = row;
  return { ...shown, takenAt: takenAt.toISOString(), changedValues: changed };
}

/** Native values that differ from the backup before each row, by the two contents' hashes. */
async function changesOf(db: Db, ownerId: string, rows: readonly Row[]): Promise<(row: Row) => number | null> {
  const pairs = rows.flatMap((row) =>
    row.previousHash === null ? [] : [{ left: row.previousHash, right: row.contentHash }],
  );
  const counts = await changedValues(db, ownerId, pairs);
  return (row) => (row.previousHash === null ? null : counts({ left: row.previousHash, right: row.contentHash }));
}

function owned({ ownerId, id }: OwnedKey) {
  return and(eq(backup.ownerId, ownerId), eq(backup.id, id));
}

/** A device's backups, latest first. Errors: "bad-cursor"; "absent" when the device is not the owner's. */
export async function listBackups(
  db: Db,
  key: { readonly ownerId: string; readonly deviceId: string },
  { cursor, limit }: PageQuery,
): Promise<Result<Page<BackupView>, "bad-cursor" | "absent">> {
  const from = readCursor(cursor, "time");
  if (!from.ok) return from;
  const [held] = await db
    .select({ id: device.id })
    .from(device)
    .where(and(eq(device.ownerId, key.ownerId), eq(device.id, key.deviceId), isNull(device.deletedAt)));
  if (held === undefined) return fail("absent");
  const rows = await selectBackups(db)
    .where(
      and(
        eq(backup.deviceId, key.deviceId),
        isNull(backup.deletedAt),
        from.value === null
          ? undefined
          : sql`(${backup.takenAt}, ${backup.id}) < (${from.value.after}::timestamptz, ${from.value.id}::uuid)`,
      ),
    )
    .orderBy(desc(backup.takenAt), desc(backup.id))
    .limit(limit + 1);
  const changed = await changesOf(db, key.ownerId, rows.slice(0, limit));
  return ok(
    pageFrom(
      rows,
      limit,
      (row) => ({ after: row.sortedBy, id: row.id }),
      (row) => viewOf(row, changed(row)),
    ),
  );
}

/** A backup as lists show it, or null where it is not the owner's or was deleted. */
export async function findBackup(db: Db, key: OwnedKey): Promise<BackupView | null> {
  const [row] = await selectBackups(db).where(and(owned(key), isNull(backup.deletedAt)));
  return row === undefined ? null : viewOf(row, (await changesOf(db, key.ownerId, [row]))(row));
}

/** A backup with everything that it holds. Error: "absent" when it is not the owner's, or was deleted. */
export async function getBackup(db: Db, key: OwnedKey): Promise<Result<BackupDetail, "absent">> {
  const found = await findBackup(db, key);
  if (found === null) return fail("absent");
  const [held] = await db
    .select({
      driverSlug: backupContent.driverSlug,
      driverVersion: backupContent.driverVersion,
      values: backupContent.values,
      unreadable: backupContent.unreadable,
      document: backupContent.document,
    })
    .from(backupContent)
    .where(and(eq(backupContent.ownerId, key.ownerId), eq(backupContent.hash, found.contentHash)));
  if (held === undefined) throw new Error("a backup without content");
  const { driverSlug, driverVersion, values, unreadable, document } = held;
  const content = {
    driver: { slug: driverSlug, version: driverVersion },
    values,
    unreadable: [...unreadable],
    document,
  };
  return ok({ ...found, content });
}

export type BackupValues = {
  /** Chosen by the demo alone. */
  readonly id?: string | undefined;
  readonly deviceId: string;
  readonly name: string;
  readonly cause: "by-hand" | "before-run" | "after-run";
  readonly takenAt: Date;
  readonly content: BackupContent;
  readonly firmware: string;
  readonly activeSlot: number;
  readonly arriving: SourceFormat | null;
  readonly rasterOut: RasterTiming | null;
};

/** The hash that equal contents share: over driver, values and unreadable keys; the document follows from them. */
export function contentHash({ driver, values, unreadable }: BackupContent): string {
  return hashValue({ driver, values, unreadable });
}

/**
 * Stores a backup; content that the owner has already is not stored again.
 * Errors: "absent" when the device is not the owner's; "other-driver" when the device is another model.
 */
export async function createBackup(
  db: Db,
  ownerId: string,
  { deviceId, content, ...values }: BackupValues,
): Promise<Result<BackupDetail, "absent" | "other-driver">> {
  return db.transaction(async (tx) => {
    const [held] = await tx
      .update(device)
      .set({ firmware: values.firmware, driverVersion: content.driver.version, updatedAt: sql`now()` })
      .where(
        and(
          eq(device.ownerId, ownerId),
          eq(device.id, deviceId),
          isNull(device.deletedAt),
          eq(device.driverSlug, content.driver.slug),
        ),
      )
      .returning({ id: device.id });
    if (held === undefined) return fail((await isOwned(tx, ownerId, deviceId)) ? "other-driver" : "absent");
    const hash = contentHash(content);
    await tx
      .insert(backupContent)
      .values({
        ownerId,
        hash,
        driverSlug: content.driver.slug,
        driverVersion: content.driver.version,
        values: content.values,
        unreadable: content.unreadable,
        document: content.document,
      })
      .onConflictDoNothing();
    const [made] = await tx
      .insert(backup)
      .values({ ...values, ownerId, deviceId, contentHash: hash })
      .returning({ id: backup.id });
    if (made === undefined) throw new Error("an insert gave no row");
    await writeAudit(tx, {
      actorId: ownerId,
      action: "backup.create",
      subject: made.id,
      detail: { cause: values.cause },
    });
    // The row was made in this transaction, so "absent" cannot come back.
    return getBackup(tx, { ownerId, id: made.id });
  });
}

async function isOwned(tx: Db, ownerId: string, deviceId: string): Promise<boolean> {
  const found = await tx
    .select({ id: device.id })
    .from(device)
    .where(and(eq(device.ownerId, ownerId), eq(device.id, deviceId), isNull(device.deletedAt)));
  return found.length > 0;
}
