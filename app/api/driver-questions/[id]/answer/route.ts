import { writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { answerQuestion } from "@/db/queries/driver-questions";
import { idParams } from "@/lib/contracts/page";
import { questionAnswer, questionView } from "@/lib/contracts/recording";

export const PUT = withRoute(
  {
    role: "maintainer",
    summary: "Answer a question about a driver.",
    params: idParams,
    body: questionAnswer,
    response: questionView,
    limit: writesOften,
  },
  async ({ user, params, body }) => respond(await answerQuestion(db, user, params.id, body.text), { absent: 404 }),
);
