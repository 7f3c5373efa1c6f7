import { readIfMatch } from "@/app/api/_http/etag";
import { readsOften, writesOften } from "@/app/api/_http/limits";
import { problem } from "@/app/api/_http/problem";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { createRun, listRuns } from "@/db/queries/runs";
import { newRun, runPage, runQuery, runView } from "@/lib/contracts/run";

export const GET = withRoute(
  { role: "owner", summary: "The owner's runs, latest first.", query: runQuery, response: runPage, limit: readsOften },
  async ({ user, query }) => respond(await listRuns(db, user.id, query), { "bad-cursor": 400 }),
);

export const POST = withRoute(
  {
    role: "owner",
    summary: "Open a run of a stored plan whose hash If-Match names. A device has one open run at a time.",
    body: newRun,
    response: runView,
    status: 201,
    limit: writesOften,
  },
  async ({ user, body, request }) => {
    const reviewed = readIfMatch(request);
    if (!reviewed.ok) return problem(400, { errors: [{ path: "If-Match", message: "Is not one entity tag." }] });
    if (reviewed.value === null) return problem(428, { detail: "Name the plan's hash in If-Match." });
    return respond(
      await createRun(db, user.id, { ...body, planHash: reviewed.value }),
      { absent: 404, stale: 412, "open-run": 409 },
      ({ id }) => ({ status: 201, headers: { location: `/api/runs/${id}` } }),
    );
  },
);
