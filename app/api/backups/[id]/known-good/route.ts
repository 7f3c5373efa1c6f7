import { writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { pinBackup } from "@/db/queries/backup-acts";
import { backupView } from "@/lib/contracts/backup";
import { idParams } from "@/lib/contracts/page";

export const PUT = withRoute(
  {
    role: "owner",
    summary: "Pin a backup as its device's known good one.",
    params: idParams,
    response: backupView,
    limit: writesOften,
  },
  async ({ user, params }) => respond(await pinBackup(db, { ownerId: user.id, id: params.id }, true), { absent: 404 }),
);

export const DELETE = withRoute(
  {
    role: "owner",
    summary: "Take the pin of a known good backup away.",
    params: idParams,
    response: backupView,
    limit: writesOften,
  },
  async ({ user, params }) => respond(await pinBackup(db, { ownerId: user.id, id: params.id }, false), { absent: 404 }),
);
