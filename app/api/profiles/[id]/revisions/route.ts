import { etag } from "@/app/api/_http/etag";
import { requiredVersion } from "@/app/api/_http/expected-version";
import { documentBytes, readsOften, writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { addRevision } from "@/db/queries/publish";
import { listRevisions } from "@/db/queries/revisions";
import { idParams, pageQuery } from "@/lib/contracts/page";
import { newRevision, profileDetail, revisionPage } from "@/lib/contracts/profile";

export const GET = withRoute(
  {
    role: "anyone",
    summary: "A profile's revisions, newest first.",
    params: idParams,
    query: pageQuery,
    response: revisionPage,
    limit: readsOften,
  },
  async ({ user, params, query }) =>
    respond(await listRevisions(db, { askerId: user?.id ?? null, id: params.id }, query), {
      absent: 404,
      "bad-cursor": 400,
    }),
);

export const POST = withRoute(
  {
    role: "owner",
    summary: "Add a revision after the one named in If-Match.",
    params: idParams,
    body: newRevision,
    response: profileDetail,
    status: 201,
    limit: { ...writesOften, bodyBytes: documentBytes },
  },
  async ({ user, params, body, request }) => {
    const after = requiredVersion(request);
    if (!after.ok) return after.error;
    const added = await addRevision(db, user, { id: params.id, after: after.value }, { ...body, at: new Date() });
    return respond(added, { absent: 404, forbidden: 403, stale: 412 }, ({ currentRevision }) => ({
      status: 201,
      headers: { location: `/api/profiles/${params.id}/revisions/${currentRevision}`, etag: etag(currentRevision) },
    }));
  },
);
