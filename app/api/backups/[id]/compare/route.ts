import { readsOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { getBackup } from "@/db/queries/backups";
import { backupCompareQuery, backupComparison } from "@/lib/contracts/backup";
import { idParams } from "@/lib/contracts/page";
import { ok } from "@/lib/result";
import { compareBackups } from "@/lib/server/compare-backups";

export const GET = withRoute(
  {
    role: "owner",
    summary: "What changed from this backup to the one named by `with`.",
    params: idParams,
    query: backupCompareQuery,
    response: backupComparison,
    limit: readsOften,
  },
  async ({ user, params, query }) => {
    const left = await getBackup(db, { ownerId: user.id, id: params.id });
    const right = left.ok ? await getBackup(db, { ownerId: user.id, id: query.with }) : left;
    if (!left.ok || !right.ok) return respond(left.ok ? right : left, { absent: 404 });
    return respond(ok(compareBackups(left.value, right.value)), {});
  },
);
