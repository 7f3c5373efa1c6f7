import { etag } from "@/app/api/_http/etag";
import { definitionBytes, writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { driverVersionDetail } from "@/lib/contracts/driver";
import { draftFromFile } from "@/lib/server/driver-versions";

export const POST = withRoute(
  {
    role: "maintainer",
    summary: "Begin a draft from a .driver.json file, which is the body.",
    rawBody: ["application/json", "application/octet-stream"],
    response: driverVersionDetail,
    status: 201,
    limit: { ...writesOften, bodyBytes: definitionBytes },
  },
  async ({ user, body }) =>
    respond(
      await draftFromFile(db, user, body),
      { "not-a-definition": 422, known: 409 },
      ({ slug, version, revision }) => ({
        status: 201,
        headers: { location: `/api/drivers/${slug}/versions/${version}`, etag: etag(revision) },
      }),
    ),
);
