import { and, asc, desc, eq, isNull, notInArray, sql } from "drizzle-orm";
import { alias } from "drizzle-orm/pg-core";
import type { Db } from "@/db/client";
import { writeAudit } from "@/db/queries/audit";
import { isUniqueViolation } from "@/db/queries/errors";
import { pageFrom, readCursor } from "@/db/queries/paging";
import type { OwnedKey } from "@/db/queries/paging";
import { backup } from "@/db/schema/backup";
import { device } from "@/db/schema/device";
import { run } from "@/db/schema/run";
import { screen } from "@/db/schema/screen";
import type { DeviceQuery, DeviceView } from "@/lib/contracts/device";
import type { Page } from "@/lib/contracts/page";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";
import { FINAL_RUN_STATES } from "@/lib/serial/run/types";

const knownGood = alias(backup, "known_good");

/** Every device with its screen, last backup, known-good backup and open run: one query, whatever the page's length. */
function selectDevices(db: Db) {
  const last = db
    .select({
      id: backup.id,
      name: backup.name,
      takenAt: backup.takenAt,
      activeSlot: backup.activeSlot,
      rasterOut: backup.rasterOut,
      contentHash: backup.contentHash,
    })
    .from(backup)
    .where(and(eq(backup.deviceId, device.id), isNull(backup.deletedAt)))
    .orderBy(desc(backup.takenAt), desc(backup.id))
    .limit(1)
    .as("last_backup");
  return db
    .select({
      row: device,
      screen: { id: screen.id, name: screen.name },
      last: {
        id: last.id,
        name: last.name,
        takenAt: last.takenAt,
        activeSlot: last.activeSlot,
        rasterOut: last.rasterOut,
        contentHash: last.contentHash,
      },
      knownGoodHash: knownGood.contentHash,
      openRun: { id: run.id, state: run.state },
    })
    .from(device)
    .leftJoin(screen, eq(screen.id, device.screenId))
    .leftJoinLateral(last, sql`true`)
    .leftJoin(knownGood, eq(knownGood.id, device.knownGoodBackupId))
    .leftJoin(run, and(eq(run.deviceId, device.id), notInArray(run.state, [...FINAL_RUN_STATES])));
}

type Row = Awaited<ReturnType<typeof selectDevices>>[number];

function viewOf({ row, screen: shownOn, last, knownGoodHash, openRun }: Row): DeviceView {
  return {
    id: row.id,
    name: row.name,
    driver: { slug: row.driverSlug, version: row.driverVersion },
    maker: row.maker,
    model: row.model,
    serialNumber: row.serialNumber,
    firmware: row.firmware,
    simulated: row.simulated,
    screen: shownOn,
    knownGoodBackupId: row.knownGoodBackupId,
    lastBackup: last?.takenAt
      ? {
          id: last.id,
          name: last.name,
          takenAt: last.takenAt.toISOString(),
          activeSlot: last.activeSlot,
          rasterOut: last.rasterOut,
        }
      : null,
    differsFromKnownGood: last === null || knownGoodHash === null ? null : last.contentHash !== knownGoodHash,
    openRun,
    version: row.version,
    createdAt: row.createdAt.toISOString(),
  };
}

function owned({ ownerId, id }: OwnedKey) {
  return and(eq(device.ownerId, ownerId), eq(device.id, id), isNull(device.deletedAt));
}

/** An owner's devices by name; by identity where the query names one. Error: "bad-cursor". */
export async function listDevices(
  db: Db,
  ownerId: string,
  { cursor, limit, driverSlug, serialNumber }: DeviceQuery,
): Promise<Result<Page<DeviceView>, "bad-cursor">> {
  const from = readCursor(cursor, "text");
  if (!from.ok) return from;
  const rows = await selectDevices(db)
    .where(
      and(
        eq(device.ownerId, ownerId),
        isNull(device.deletedAt),
        driverSlug === undefined ? undefined : eq(device.driverSlug, driverSlug),
        serialNumber === undefined ? undefined : eq(device.serialNumber, serialNumber),
        from.value === null
          ? undefined
          : sql`(${device.name}, ${device.id}) > (${from.value.after}, ${from.value.id}::uuid)`,
      ),
    )
    .orderBy(asc(device.name), asc(device.id))
    .limit(limit + 1);
  return ok(pageFrom(rows, limit, ({ row }) => ({ after: row.name, id: row.id }), viewOf));
}

/** Error: "absent" when it is not the owner's, or was deleted. */
export async function getDevice(db: Db, key: OwnedKey): Promise<Result<DeviceView, "absent">> {
  const [found] = await selectDevices(db).where(owned(key));
  return found === undefined ? fail("absent") : ok(viewOf(found));
}

export type DeviceValues = {
  /** Chosen by the demo alone. */
  readonly id?: string | undefined;
  readonly name: string;
  readonly driver: { readonly slug: string; readonly version: string };
  readonly maker: string;
  readonly model: string;
  readonly serialNumber?: string | undefined;
  readonly firmware: string;
  readonly simulated: boolean;
  readonly screenId?: string | undefined;
};

/** Errors: "known" when the owner has this very device; "no-screen" when the screen is not the owner's. */
export async function createDevice(
  db: Db,
  ownerId: string,
  { driver, screenId, ...values }: DeviceValues,
): Promise<Result<DeviceView, "known" | "no-screen">> {
  try {
    return await db.transaction(async (tx) => {
      if (screenId !== undefined && !(await ownsScreen(tx, ownerId, screenId))) return fail("no-screen");
      const [made] = await tx
        .insert(device)
        .values({ ...values, ownerId, screenId, driverSlug: driver.slug, driverVersion: driver.version })
        .returning({ id: device.id });
      if (made === undefined) throw new Error("an insert gave no row");
      await writeAudit(tx, { actorId: ownerId, action: "device.create", subject: made.id });
      return getDevice(tx, { ownerId, id: made.id }) as Promise<Result<DeviceView, never>>;
    });
  } catch (error) {
    if (isUniqueViolation(error, "device_identity_idx")) return fail("known");
    throw error;
  }
}

async function ownsScreen(tx: Db, ownerId: string, id: string): Promise<boolean> {
  const found = await tx
    .select({ id: screen.id })
    .from(screen)
    .where(and(eq(screen.ownerId, ownerId), eq(screen.id, id), isNull(screen.deletedAt)));
  return found.length > 0;
}

export type DeviceValuesChange = {
  readonly name?: string | undefined;
  /** Null takes the screen away. */
  readonly screenId?: string | null | undefined;
  readonly firmware?: string | undefined;
};

/** Changes what is given. Errors: "absent"; "no-screen"; "stale" when `version` is given and moved on. */
export async function changeDevice(
  db: Db,
  key: OwnedKey & { readonly version?: number | undefined },
  change: DeviceValuesChange,
): Promise<Result<DeviceView, "absent" | "no-screen" | "stale">> {
  return db.transaction(async (tx) => {
    if (typeof change.screenId === "string" && !(await ownsScreen(tx, key.ownerId, change.screenId)))
      return fail("no-screen");
    const changed = await tx
      .update(device)
      .set({ ...change, version: sql`${device.version} + 1`, updatedAt: sql`now()` })
      .where(and(owned(key), key.version === undefined ? undefined : eq(device.version, key.version)))
      .returning({ id: device.id });
    if (changed.length === 0) return fail((await getDevice(tx, key)).ok ? "stale" : "absent");
    await writeAudit(tx, { actorId: key.ownerId, action: "device.change", subject: key.id });
    return getDevice(tx, key);
  });
}

/** Deletes a device and hides its backups with it. Errors: "absent"; "open-run" while a run has not ended. */
export async function deleteDevice(db: Db, key: OwnedKey): Promise<Result<null, "absent" | "open-run">> {
  return db.transaction(async (tx) => {
    const found = await getDevice(tx, key);
    if (!found.ok) return found;
    if (found.value.openRun !== null) return fail("open-run");
    await tx
      .update(device)
      .set({ deletedAt: sql`now()` })
      .where(owned(key));
    await writeAudit(tx, { actorId: key.ownerId, action: "device.delete", subject: key.id });
    return ok(null);
  });
}
