import "server-only";
import type { Db } from "@/db/client";
import { getBackup } from "@/db/queries/backups";
import { getDevice } from "@/db/queries/devices";
import type { OwnedKey } from "@/db/queries/paging";
import { getScreen } from "@/db/queries/screens";
import type { ProfileDocument } from "@/lib/profile/document";
import { fail } from "@/lib/result";
import type { Result } from "@/lib/result";
import { publishDocument } from "@/lib/server/publish-document";
import type { Publication } from "@/lib/server/publish-document";

/** The profile of some slots of an owner's backup. Errors: "absent"; "no-slot". */
export async function documentFromBackup(
  db: Db,
  key: OwnedKey,
  publication: Publication,
): Promise<Result<ProfileDocument, "absent" | "no-slot">> {
  const found = await getBackup(db, key);
  if (!found.ok) return found;
  const device = await getDevice(db, { ownerId: key.ownerId, id: found.value.deviceId });
  if (!device.ok) return fail("absent");
  const screenId = device.value.screen?.id;
  const screen = screenId === undefined ? null : await getScreen(db, { ownerId: key.ownerId, id: screenId });
  return publishDocument(found.value, publication, screen?.ok ? screen.value.envelope : null);
}
