import { writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { undeleteBackup } from "@/db/queries/backup-acts";
import { backupView } from "@/lib/contracts/backup";
import { idParams } from "@/lib/contracts/page";

export const POST = withRoute(
  {
    role: "owner",
    summary: "Take the deletion of a backup back.",
    params: idParams,
    response: backupView,
    limit: writesOften,
  },
  async ({ user, params }) => respond(await undeleteBackup(db, { ownerId: user.id, id: params.id }), { absent: 404 }),
);
