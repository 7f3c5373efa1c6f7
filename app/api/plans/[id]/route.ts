import { etag } from "@/app/api/_http/etag";
import { readsOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { getPlan } from "@/db/queries/plans";
import { idParams } from "@/lib/contracts/page";
import { planDetail } from "@/lib/contracts/plan";

export const GET = withRoute(
  {
    role: "owner",
    summary: "A plan with its whole input, to take its run up again in another browser.",
    params: idParams,
    response: planDetail,
    limit: readsOften,
  },
  async ({ user, params }) =>
    respond(await getPlan(db, { ownerId: user.id, id: params.id }), { absent: 404 }, ({ hash }) => ({
      headers: { etag: etag(hash) },
    })),
);
