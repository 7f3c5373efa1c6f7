import { etag } from "@/app/api/_http/etag";
import { readsOften, writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { deleteProfile, setVisibility } from "@/db/queries/publish";
import { getProfile } from "@/db/queries/revisions";
import { idParams } from "@/lib/contracts/page";
import { profileChange, profileDetail } from "@/lib/contracts/profile";

const withEtag = ({ currentRevision }: { currentRevision: number }) => ({ headers: { etag: etag(currentRevision) } });

export const GET = withRoute(
  {
    role: "anyone",
    summary: "A profile with its current revision.",
    params: idParams,
    response: profileDetail,
    limit: readsOften,
  },
  async ({ user, params }) =>
    respond(await getProfile(db, { askerId: user?.id ?? null, id: params.id }), { absent: 404 }, withEtag),
);

export const PATCH = withRoute(
  {
    role: "owner",
    summary: "Share a profile, or take it back.",
    params: idParams,
    body: profileChange,
    response: profileDetail,
    limit: writesOften,
  },
  async ({ user, params, body }) => {
    const changed = await setVisibility(db, { ownerId: user.id, id: params.id }, body.visibility);
    return respond(changed, { absent: 404, forbidden: 403 }, withEtag);
  },
);

export const DELETE = withRoute(
  { role: "owner", summary: "Take a profile out of every list.", params: idParams, status: 204, limit: writesOften },
  async ({ user, params }) =>
    respond(
      await deleteProfile(db, { ownerId: user.id, id: params.id }),
      { absent: 404, forbidden: 403 },
      { status: 204 },
    ),
);
