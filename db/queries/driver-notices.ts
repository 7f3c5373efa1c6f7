import { and, asc, eq, isNull, sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { writeAudit } from "@/db/queries/audit";
import { getDevice } from "@/db/queries/devices";
import type { OwnedKey } from "@/db/queries/paging";
import { device } from "@/db/schema/device";
import { driverVersion } from "@/db/schema/driver";
import type { DeviceView } from "@/lib/contracts/device";
import type { DriverNotice } from "@/lib/contracts/driver";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";

/** Notices of one owner that are shown: as many as anybody reads. */
const maxNotices = 100;

/**
 * An owner's devices whose driver version was withdrawn, or is not the highest published one and was not acknowledged.
 * By name of the device.
 */
export async function listNotices(db: Db, ownerId: string): Promise<DriverNotice[]> {
  const latest = db
    .select({ version: driverVersion.version, note: driverVersion.note, order: driverVersion.versionOrder })
    .from(driverVersion)
    .where(and(eq(driverVersion.slug, device.driverSlug), eq(driverVersion.state, "published")))
    .orderBy(sql`${driverVersion.versionOrder} desc`)
    .limit(1)
    .as("latest");
  const own = db
    .select({ state: driverVersion.state, reason: driverVersion.withdrawnReason })
    .from(driverVersion)
    .where(and(eq(driverVersion.slug, device.driverSlug), eq(driverVersion.version, device.driverVersion)))
    .limit(1)
    .as("own");
  const rows = await db
    .select({
      id: device.id,
      name: device.name,
      slug: device.driverSlug,
      from: device.driverVersion,
      to: latest.version,
      note: latest.note,
      ownState: own.state,
      reason: own.reason,
    })
    .from(device)
    .leftJoinLateral(latest, sql`true`)
    .leftJoinLateral(own, sql`true`)
    .where(
      and(
        eq(device.ownerId, ownerId),
        isNull(device.deletedAt),
        sql`(${own.state} = 'withdrawn'
          or (${latest.order} > string_to_array(${device.driverVersion}, '.')::int[]
            and ${device.acknowledgedDriverVersion} is distinct from ${latest.version}))`,
      ),
    )
    .orderBy(asc(device.name), asc(device.id))
    .limit(maxNotices);
  return rows.map(({ id, name, slug, from, to, note, ownState, reason }) => {
    const withdrawn = ownState === "withdrawn";
    return {
      kind: withdrawn ? "withdrawn" : "new-version",
      device: { id, name },
      slug,
      from,
      to,
      note: (withdrawn ? reason : note) ?? "",
    };
  });
}

function owned({ ownerId, id }: OwnedKey) {
  return and(eq(device.ownerId, ownerId), eq(device.id, id), isNull(device.deletedAt));
}

async function isPublished(tx: Db, slug: string, version: string): Promise<boolean> {
  const found = await tx
    .select({ id: driverVersion.id })
    .from(driverVersion)
    .where(and(eq(driverVersion.slug, slug), eq(driverVersion.version, version), eq(driverVersion.state, "published")));
  return found.length > 0;
}

async function changeDriver(
  db: Db,
  key: OwnedKey,
  version: string,
  action: "device.driver-move" | "device.driver-acknowledge",
): Promise<Result<DeviceView, "absent" | "no-version" | "open-run">> {
  return db.transaction(async (tx) => {
    const found = await getDevice(tx, key);
    if (!found.ok) return found;
    const { driver, openRun } = found.value;
    if (!(await isPublished(tx, driver.slug, version))) return fail("no-version");
    const moves = action === "device.driver-move";
    // A run goes on with the driver that its plan was made with.
    if (moves && openRun !== null) return fail("open-run");
    await tx
      .update(device)
      .set({
        ...(moves ? { driverVersion: version } : {}),
        acknowledgedDriverVersion: version,
        version: sql`${device.version} + 1`,
        updatedAt: sql`now()`,
      })
      .where(owned(key));
    await writeAudit(tx, {
      actorId: key.ownerId,
      action,
      subject: key.id,
      detail: { from: driver.version, to: version },
    });
    const changed = await getDevice(tx, key);
    return changed.ok ? ok(changed.value) : changed;
  });
}

/** Moves a device to a published version of its driver. Errors: "absent"; "no-version"; "open-run". */
export function moveDevice(
  db: Db,
  key: OwnedKey,
  version: string,
): Promise<Result<DeviceView, "absent" | "no-version" | "open-run">> {
  return changeDriver(db, key, version, "device.driver-move");
}

/** Puts the notice of a version aside; the device stays with the one that it has. Errors as of `moveDevice`. */
export function acknowledgeVersion(
  db: Db,
  key: OwnedKey,
  version: string,
): Promise<Result<DeviceView, "absent" | "no-version" | "open-run">> {
  return changeDriver(db, key, version, "device.driver-acknowledge");
}
