import { readsOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { getRun } from "@/db/queries/runs";
import { idParams } from "@/lib/contracts/page";
import { runView } from "@/lib/contracts/run";

export const GET = withRoute(
  { role: "owner", summary: "Where a run stands.", params: idParams, response: runView, limit: readsOften },
  async ({ user, params }) => respond(await getRun(db, { ownerId: user.id, id: params.id }), { absent: 404 }),
);
