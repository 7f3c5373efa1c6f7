import { etag } from "@/app/api/_http/etag";
import { definitionBytes, readsOften, writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { listVersions } from "@/db/queries/drivers";
import { driverVersionDetail, driverVersionPage, newDriverVersion, slugParams } from "@/lib/contracts/driver";
import { pageQuery } from "@/lib/contracts/page";
import { draftFrom } from "@/lib/server/driver-versions";

export const GET = withRoute(
  {
    role: "anyone",
    summary: "A driver's versions, highest first; drafts and candidates are shown to maintainers alone.",
    params: slugParams,
    query: pageQuery,
    response: driverVersionPage,
    limit: readsOften,
  },
  async ({ user, params, query }) =>
    respond(await listVersions(db, user, params.slug, query), { absent: 404, "bad-cursor": 400 }),
);

export const POST = withRoute(
  {
    role: "maintainer",
    summary:
      "Begin a version as a draft, and its driver where it is the first. It may be unfinished: the answer says what is wrong, by path.",
    params: slugParams,
    body: newDriverVersion,
    response: driverVersionDetail,
    status: 201,
    limit: { ...writesOften, bodyBytes: definitionBytes },
  },
  async ({ user, params, body }) =>
    respond(
      await draftFrom(db, user, body.definition, params, body.note),
      { "not-a-definition": 422, known: 409 },
      ({ slug, version, revision }) => ({
        status: 201,
        headers: { location: `/api/drivers/${slug}/versions/${version}`, etag: etag(revision) },
      }),
    ),
);
