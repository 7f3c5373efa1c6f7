import { etag } from "@/app/api/_http/etag";
import { readsOften, writesOften } from "@/app/api/_http/limits";
import { problem } from "@/app/api/_http/problem";
import { json, respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { createScreen, listScreens } from "@/db/queries/screens";
import { pageQuery } from "@/lib/contracts/page";
import { newScreen, screenPage, screenView } from "@/lib/contracts/screen";
import { envelopeProblems } from "@/lib/timing/envelope-problems";

export const GET = withRoute(
  {
    role: "owner",
    summary: "The owner's screens, by name.",
    query: pageQuery,
    response: screenPage,
    limit: readsOften,
  },
  async ({ user, query }) => respond(await listScreens(db, user.id, query), { "bad-cursor": 400 }),
);

export const POST = withRoute(
  { role: "owner", summary: "Add a screen.", body: newScreen, response: screenView, status: 201, limit: writesOften },
  async ({ user, body }) => {
    const errors = envelopeProblems(body.envelope).map(({ path, message }) => ({ path: `envelope.${path}`, message }));
    if (errors.length > 0) return problem(400, { errors });
    const made = await createScreen(db, user.id, body);
    return json(made, { status: 201, headers: { location: `/api/screens/${made.id}`, etag: etag(made.version) } });
  },
);
