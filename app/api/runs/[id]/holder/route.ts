import { journalOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { holdRun } from "@/db/queries/runs";
import { idParams } from "@/lib/contracts/page";
import { holderChange, runView } from "@/lib/contracts/run";

export const PUT = withRoute(
  {
    role: "owner",
    summary: "Hold a run, or take it over from a tab that was not heard of for 30 s or that the owner gives up.",
    params: idParams,
    body: holderChange,
    response: runView,
    limit: journalOften,
  },
  async ({ user, params, body }) =>
    respond(await holdRun(db, { ownerId: user.id, id: params.id }, body), { absent: 404, held: 409, ended: 409 }),
);
