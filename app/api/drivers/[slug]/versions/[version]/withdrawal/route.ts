import { etag } from "@/app/api/_http/etag";
import { requiredVersion } from "@/app/api/_http/expected-version";
import { writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { withdrawVersion } from "@/db/queries/driver-acts";
import { driverVersionView, versionParams, withdrawal } from "@/lib/contracts/driver";

export const POST = withRoute(
  {
    role: "maintainer",
    summary:
      "Withdraw a published version at the revision named in If-Match. Owners of devices that use it are told why.",
    params: versionParams,
    body: withdrawal,
    response: driverVersionView,
    limit: writesOften,
  },
  async ({ user, params, body, request }) => {
    const revision = requiredVersion(request);
    if (!revision.ok) return revision.error;
    const withdrawn = await withdrawVersion(db, user, { ...params, revision: revision.value }, body.reason);
    const refusals = { absent: 404, stale: 412, "not-published": 409 } as const;
    return respond(withdrawn, refusals, (version) => ({ headers: { etag: etag(version.revision) } }));
  },
);
