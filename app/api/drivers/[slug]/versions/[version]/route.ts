import { etag } from "@/app/api/_http/etag";
import { requiredVersion } from "@/app/api/_http/expected-version";
import { definitionBytes, readsOften, writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { changeDraft, deleteDraft } from "@/db/queries/driver-acts";
import { draftChange, driverVersionDetail, versionParams } from "@/lib/contracts/driver";
import { detailOf, storableDefinition, versionDetail } from "@/lib/server/driver-versions";

const withEtag = ({ revision }: { revision: number }) => ({ headers: { etag: etag(revision) } });

export const GET = withRoute(
  {
    role: "anyone",
    summary: "A version of a driver with its definition and what is wrong with it, by path.",
    params: versionParams,
    response: driverVersionDetail,
    limit: readsOften,
  },
  async ({ user, params }) => respond(await versionDetail(db, user, params), { absent: 404 }, withEtag),
);

export const PUT = withRoute(
  {
    role: "maintainer",
    summary: "Change what a draft says, after the revision named in If-Match; a candidate is a draft again.",
    params: versionParams,
    body: draftChange,
    response: driverVersionDetail,
    limit: { ...writesOften, bodyBytes: definitionBytes },
  },
  async ({ user, params, body, request }) => {
    const revision = requiredVersion(request);
    if (!revision.ok) return revision.error;
    const storable = storableDefinition(body.definition, params);
    if (!storable.ok) return respond(storable, { "not-a-definition": 422 });
    const { definition } = storable.value;
    const change = { definition, note: body.note };
    const changed = await changeDraft(db, user, { ...params, revision: revision.value }, change);
    if (!changed.ok) return respond(changed, { absent: 404, stale: 412, published: 409 });
    return respond({ ok: true, value: detailOf(changed.value, definition) }, {}, withEtag);
  },
);

export const DELETE = withRoute(
  {
    role: "maintainer",
    summary: "Discard a draft or a candidate at the revision named in If-Match, with its reports.",
    params: versionParams,
    status: 204,
    limit: writesOften,
  },
  async ({ user, params, request }) => {
    const revision = requiredVersion(request);
    if (!revision.ok) return revision.error;
    const gone = await deleteDraft(db, user, { ...params, revision: revision.value });
    return respond(gone, { absent: 404, stale: 412, published: 409 }, { status: 204 });
  },
);
