import "server-only";
import type { Db } from "@/db/client";
import { getBackup } from "@/db/queries/backups";
import { getDevice } from "@/db/queries/devices";
import type { OwnedKey } from "@/db/queries/paging";
import type { DriverMovePreview } from "@/lib/contracts/driver";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";
import { diffDefinitions } from "@/lib/serial/driver/diff-definitions";
import { readDifferently } from "@/lib/serial/driver/read-differently";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";
import { findDriver } from "@/lib/server/drivers";

/**
 * What another published version of its driver says differently, and what it makes of the device's last backup.
 * Errors: "absent" when the device is not the owner's; "no-version" when one of the two is not here.
 */
export async function previewMove(
  db: Db,
  key: OwnedKey,
  to: string,
): Promise<Result<DriverMovePreview, "absent" | "no-version">> {
  const device = await getDevice(db, key);
  if (!device.ok) return device;
  const { driver, lastBackup } = device.value;
  const [left, right] = [await findDriver(db, driver), await findDriver(db, { slug: driver.slug, version: to })];
  if (!left.ok || !right.ok) return fail("no-version");
  const backup = lastBackup === null ? null : await getBackup(db, { ownerId: key.ownerId, id: lastBackup.id });
  const values = backup?.ok ? backup.value.content.values : {};
  const { changes, more } = diffDefinitions(left.value, right.value);
  const settings = readDifferently(compiledDriver(left.value), compiledDriver(right.value), values);
  return ok({
    from: driver.version,
    to,
    backupId: lastBackup?.id ?? null,
    changes: [...changes],
    more,
    settings: [...settings],
  });
}
