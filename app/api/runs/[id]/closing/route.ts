import { writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { closeRun } from "@/db/queries/runs";
import { idParams } from "@/lib/contracts/page";
import { runClosing, runView } from "@/lib/contracts/run";

export const POST = withRoute(
  {
    role: "owner",
    summary: "Name the backup that was taken after a run ended.",
    params: idParams,
    body: runClosing,
    response: runView,
    limit: writesOften,
  },
  async ({ user, params, body }) =>
    respond(await closeRun(db, { ownerId: user.id, id: params.id }, body.afterBackupId), {
      absent: 404,
      "not-ended": 409,
      "no-backup": 422,
    }),
);
