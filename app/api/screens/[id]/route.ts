import { etag } from "@/app/api/_http/etag";
import { requiredVersion } from "@/app/api/_http/expected-version";
import { readsOften, writesOften } from "@/app/api/_http/limits";
import { problem } from "@/app/api/_http/problem";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { changeScreen, deleteScreen, getScreen } from "@/db/queries/screens";
import { idParams } from "@/lib/contracts/page";
import { screenChange, screenView } from "@/lib/contracts/screen";
import { envelopeProblems } from "@/lib/timing/envelope-problems";

const withEtag = ({ version }: { version: number }) => ({ headers: { etag: etag(version) } });

export const GET = withRoute(
  { role: "owner", summary: "One screen.", params: idParams, response: screenView, limit: readsOften },
  async ({ user, params }) =>
    respond(await getScreen(db, { ownerId: user.id, id: params.id }), { absent: 404 }, withEtag),
);

export const PATCH = withRoute(
  {
    role: "owner",
    summary: "Change a screen that still has the version named in If-Match.",
    params: idParams,
    body: screenChange,
    response: screenView,
    limit: writesOften,
  },
  async ({ user, params, body, request }) => {
    const version = requiredVersion(request);
    if (!version.ok) return version.error;
    const problems = body.envelope === undefined ? [] : envelopeProblems(body.envelope);
    const errors = problems.map(({ path, message }) => ({ path: `envelope.${path}`, message }));
    if (errors.length > 0) return problem(400, { errors });
    const changed = await changeScreen(db, { ownerId: user.id, id: params.id, version: version.value }, body);
    return respond(changed, { absent: 404, stale: 412 }, withEtag);
  },
);

export const DELETE = withRoute(
  {
    role: "owner",
    summary: "Delete a screen; devices before it have none then.",
    params: idParams,
    status: 204,
    limit: writesOften,
  },
  async ({ user, params }) =>
    respond(await deleteScreen(db, { ownerId: user.id, id: params.id }), { absent: 404 }, { status: 204 }),
);
