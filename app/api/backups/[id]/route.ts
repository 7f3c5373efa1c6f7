import { etag } from "@/app/api/_http/etag";
import { expectedVersion } from "@/app/api/_http/expected-version";
import { readsOften, writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { deleteBackup, renameBackup } from "@/db/queries/backup-acts";
import { getBackup } from "@/db/queries/backups";
import { backupChange, backupDetail, backupView } from "@/lib/contracts/backup";
import { idParams } from "@/lib/contracts/page";

const withEtag = ({ version }: { version: number }) => ({ headers: { etag: etag(version) } });

export const GET = withRoute(
  {
    role: "owner",
    summary: "A backup with all that it holds.",
    params: idParams,
    response: backupDetail,
    limit: readsOften,
  },
  async ({ user, params }) =>
    respond(await getBackup(db, { ownerId: user.id, id: params.id }), { absent: 404 }, withEtag),
);

export const PATCH = withRoute(
  {
    role: "owner",
    summary: "Rename a backup.",
    params: idParams,
    body: backupChange,
    response: backupView,
    limit: writesOften,
  },
  async ({ user, params, body, request }) => {
    const version = expectedVersion(request);
    if (!version.ok) return version.error;
    const key = { ownerId: user.id, id: params.id, version: version.value };
    return respond(await renameBackup(db, key, body.name), { absent: 404, stale: 412 }, withEtag);
  },
);

export const DELETE = withRoute(
  {
    role: "owner",
    summary: "Delete a backup; it can be undeleted. One that a plan rests on, or that is known good, stays.",
    params: idParams,
    status: 204,
    limit: writesOften,
  },
  async ({ user, params }) =>
    respond(
      await deleteBackup(db, { ownerId: user.id, id: params.id }),
      { absent: 404, "in-use": 409 },
      { status: 204 },
    ),
);
