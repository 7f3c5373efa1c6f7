import { readsOften, suitesSeldom } from "@/app/api/_http/limits";
import { json, respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { storeReport } from "@/db/queries/driver-acts";
import { getReport, listReports } from "@/db/queries/driver-reports";
import { conformanceDetail, conformancePage, conformanceQuery, newConformance } from "@/lib/contracts/conformance";
import { computeReport } from "@/lib/server/conformance";

export const GET = withRoute(
  {
    role: "anyone",
    summary: "The reports of a driver version, latest first.",
    query: conformanceQuery,
    response: conformancePage,
    limit: readsOften,
  },
  async ({ user, query }) => respond(await listReports(db, user, query), { absent: 404, "bad-cursor": 400 }),
);

export const POST = withRoute(
  {
    role: "maintainer",
    summary:
      "Run the suite here, on the definition and the recordings as they are stored. A draft that comes out green becomes a candidate.",
    body: newConformance,
    response: conformanceDetail,
    status: 201,
    limit: suitesSeldom,
  },
  async ({ user, body }) => {
    const report = await computeReport(db, user, body);
    if (!report.ok) return respond(report, { absent: 404, busy: 503 });
    const stored = await storeReport(db, user, body, report.value);
    if (!stored.ok) return respond(stored, { absent: 404, stale: 409 });
    const detail = await getReport(db, user, stored.value.id);
    if (!detail.ok) return respond(detail, { absent: 404 });
    return json(detail.value, { status: 201, headers: { location: `/api/conformance/${stored.value.id}` } });
  },
);
