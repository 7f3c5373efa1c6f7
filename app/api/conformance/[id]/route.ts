import { readsOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { getReport } from "@/db/queries/driver-reports";
import { conformanceDetail } from "@/lib/contracts/conformance";
import { idParams } from "@/lib/contracts/page";

export const GET = withRoute(
  {
    role: "anyone",
    summary: "A report of conformance with all that failed.",
    params: idParams,
    response: conformanceDetail,
    limit: readsOften,
  },
  async ({ user, params }) => respond(await getReport(db, user, params.id), { absent: 404 }),
);
