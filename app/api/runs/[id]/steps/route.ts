import { journalOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { appendSteps, listSteps } from "@/db/queries/run-steps";
import { idParams } from "@/lib/contracts/page";
import { newSteps, runView, stepList, stepsQuery } from "@/lib/contracts/run";

export const GET = withRoute(
  {
    role: "owner",
    summary: "A run's journal, in order.",
    params: idParams,
    query: stepsQuery,
    response: stepList,
    limit: journalOften,
  },
  async ({ user, params, query }) =>
    respond(await listSteps(db, { ownerId: user.id, id: params.id }, query), { absent: 404 }),
);

export const POST = withRoute(
  {
    role: "owner",
    summary: "Append to a run's journal, from the tab that holds it. Sending a step again changes nothing.",
    params: idParams,
    body: newSteps,
    response: runView,
    limit: { ...journalOften, bodyBytes: 1_000_000 },
  },
  async ({ user, params, body }) =>
    respond(await appendSteps(db, { ownerId: user.id, id: params.id }, body), {
      absent: 404,
      held: 409,
      "keep-taken": 409,
      "not-a-move": 409,
      "other-step": 409,
    }),
);
