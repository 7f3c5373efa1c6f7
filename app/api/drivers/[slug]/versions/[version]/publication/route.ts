import { etag } from "@/app/api/_http/etag";
import { requiredVersion } from "@/app/api/_http/expected-version";
import { writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { publishVersion } from "@/db/queries/driver-acts";
import { driverVersionView, versionParams } from "@/lib/contracts/driver";

export const POST = withRoute(
  {
    role: "maintainer",
    summary:
      "Publish a candidate at the revision named in If-Match. The latest report of this very definition has to be green.",
    params: versionParams,
    response: driverVersionView,
    limit: writesOften,
  },
  async ({ user, params, request }) => {
    const revision = requiredVersion(request);
    if (!revision.ok) return revision.error;
    const published = await publishVersion(db, user, { ...params, revision: revision.value });
    const refusals = { absent: 404, stale: 412, "not-a-candidate": 409, red: 409 } as const;
    return respond(published, refusals, (version) => ({ headers: { etag: etag(version.revision) } }));
  },
);
