import { and, eq, isNotNull, isNull, sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { writeAudit } from "@/db/queries/audit";
import { findBackup } from "@/db/queries/backups";
import { isRestrictViolation } from "@/db/queries/errors";
import type { OwnedKey } from "@/db/queries/paging";
import { backup } from "@/db/schema/backup";
import { device } from "@/db/schema/device";
import type { BackupView } from "@/lib/contracts/backup";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";

function owned({ ownerId, id }: OwnedKey) {
  return and(eq(backup.ownerId, ownerId), eq(backup.id, id));
}

/** Renames a backup that still has `version`. Errors: "absent"; "stale" when it moved on. */
export async function renameBackup(
  db: Db,
  key: OwnedKey & { readonly version?: number | undefined },
  name: string,
): Promise<Result<BackupView, "absent" | "stale">> {
  return db.transaction(async (tx) => {
    const changed = await tx
      .update(backup)
      .set({ name, version: sql`${backup.version} + 1` })
      .where(
        and(
          owned(key),
          isNull(backup.deletedAt),
          key.version === undefined ? undefined : eq(backup.version, key.version),
        ),
      )
      .returning({ id: backup.id });
    const found = await findBackup(tx, key);
    if (found === null) return fail("absent");
    if (changed.length === 0) return fail("stale");
    await writeAudit(tx, { actorId: key.ownerId, action: "backup.rename", subject: key.id });
    return ok(found);
  });
}

/** Hides a backup; `undeleteBackup` shows it again. Errors: "absent"; "in-use" by a plan, or as known good. */
export async function deleteBackup(db: Db, key: OwnedKey): Promise<Result<null, "absent" | "in-use">> {
  try {
    return await db.transaction(async (tx) => {
      const gone = await tx
        .update(backup)
        .set({ deletedAt: sql`now()` })
        .where(and(owned(key), isNull(backup.deletedAt)))
        .returning({ id: backup.id });
      if (gone.length === 0) return fail("absent");
      await writeAudit(tx, { actorId: key.ownerId, action: "backup.delete", subject: key.id });
      return ok(null);
    });
  } catch (error) {
    if (isRestrictViolation(error)) return fail("in-use");
    throw error;
  }
}

/** Takes a deletion back. Error: "absent" when there is no deleted backup of that id. */
export async function undeleteBackup(db: Db, key: OwnedKey): Promise<Result<BackupView, "absent">> {
  return db.transaction(async (tx) => {
    await tx
      .update(backup)
      .set({ deletedAt: null })
      .where(and(owned(key), isNotNull(backup.deletedAt)));
    const found = await findBackup(tx, key);
    if (found === null) return fail("absent");
    await writeAudit(tx, { actorId: key.ownerId, action: "backup.undelete", subject: key.id });
    return ok(found);
  });
}

/** Pins a backup as its device's known good one, or takes the pin away. Error: "absent". */
export async function pinBackup(db: Db, key: OwnedKey, pinned: boolean): Promise<Result<BackupView, "absent">> {
  return db.transaction(async (tx) => {
    const found = await findBackup(tx, key);
    if (found === null) return fail("absent");
    await tx
      .update(device)
      .set({ knownGoodBackupId: pinned ? key.id : null, version: sql`${device.version} + 1`, updatedAt: sql`now()` })
      .where(and(eq(device.id, found.deviceId), pinned ? undefined : eq(device.knownGoodBackupId, key.id)));
    await writeAudit(tx, { actorId: key.ownerId, action: pinned ? "backup.pin" : "backup.unpin", subject: key.id });
    return ok({ ...found, knownGood: pinned });
  });
}
