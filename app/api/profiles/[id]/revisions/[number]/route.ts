import { readsOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { getRevision } from "@/db/queries/revisions";
import { revisionDetail, revisionParams } from "@/lib/contracts/profile";

export const GET = withRoute(
  {
    role: "anyone",
    summary: "One revision with its document.",
    params: revisionParams,
    response: revisionDetail,
    limit: readsOften,
  },
  async ({ user, params }) =>
    respond(await getRevision(db, { askerId: user?.id ?? null, id: params.id, number: params.number }), {
      absent: 404,
    }),
);
