import { etag } from "@/app/api/_http/etag";
import { documentBytes, writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { createPlan } from "@/db/queries/plans";
import { newPlan, planView } from "@/lib/contracts/plan";
import { planAgain } from "@/lib/server/plan-again";

const refusals = {
  absent: 404,
  "no-driver": 422,
  "no-screen": 422,
  "no-revision": 422,
  "no-target": 422,
  "other-driver": 422,
  "bad-patch": 422,
  "no-plan": 422,
  "other-hash": 409,
} as const;

export const POST = withRoute(
  {
    role: "owner",
    summary: "Store a reviewed plan. It is checked and planned again here; a stop or another hash gives no id.",
    body: newPlan,
    response: planView,
    status: 201,
    limit: { ...writesOften, bodyBytes: documentBytes },
  },
  async ({ user, body }) => {
    const made = await planAgain(db, user.id, body);
    if (!made.ok) return respond(made, refusals);
    return respond(await createPlan(db, user.id, made.value), { absent: 404 }, ({ id, hash }) => ({
      status: 201,
      headers: { location: `/api/plans/${id}`, etag: etag(hash) },
    }));
  },
);
