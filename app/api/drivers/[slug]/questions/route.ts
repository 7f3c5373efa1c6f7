import { readsOften, writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { askQuestion, listQuestions } from "@/db/queries/driver-questions";
import { slugParams } from "@/lib/contracts/driver";
import { pageQuery } from "@/lib/contracts/page";
import { newQuestion, questionPage, questionView } from "@/lib/contracts/recording";

export const GET = withRoute(
  {
    role: "owner",
    summary: "One's own questions about a driver, for maintainers everybody's, latest first.",
    params: slugParams,
    query: pageQuery,
    response: questionPage,
    limit: readsOften,
  },
  async ({ user, params, query }) => respond(await listQuestions(db, user, params.slug, query), { "bad-cursor": 400 }),
);

export const POST = withRoute(
  {
    role: "owner",
    summary: "Ask the maintainers of a driver. A recording that is attached can be seen by them from then on.",
    params: slugParams,
    body: newQuestion,
    response: questionView,
    status: 201,
    limit: writesOften,
  },
  async ({ user, params, body }) =>
    respond(
      await askQuestion(db, user, { ...body, slug: params.slug }),
      { absent: 404, "no-recording": 422 },
      { status: 201 },
    ),
);
