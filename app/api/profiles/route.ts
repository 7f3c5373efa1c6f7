import { etag } from "@/app/api/_http/etag";
import { documentBytes, readsOften, writesOften } from "@/app/api/_http/limits";
import { json, respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { listProfiles } from "@/db/queries/profiles";
import { createProfile } from "@/db/queries/publish";
import { newProfile, profileDetail, profilePage, profileQuery } from "@/lib/contracts/profile";
import { ok } from "@/lib/result";
import { documentFromBackup } from "@/lib/server/publish-backup";

export const GET = withRoute(
  {
    role: "anyone",
    summary: "Shared profiles, or one's own, last changed first. With a screen: how many of the modes it takes.",
    query: profileQuery,
    response: profilePage,
    limit: readsOften,
  },
  async ({ user, query }) =>
    respond(await listProfiles(db, user?.id ?? null, query), { "bad-cursor": 400, "no-screen": 422 }),
);

export const POST = withRoute(
  {
    role: "owner",
    summary: "Publish a document, or some slots of a backup, as a profile.",
    body: newProfile,
    response: profileDetail,
    status: 201,
    limit: { ...writesOften, bodyBytes: documentBytes },
  },
  async ({ user, body }) => {
    const document =
      "fromBackup" in body
        ? await documentFromBackup(db, { ownerId: user.id, id: body.fromBackup }, body)
        : ok(body.document);
    if (!document.ok) return respond(document, { absent: 404, "no-slot": 422 });
    const { visibility, note } = body;
    const made = await createProfile(db, user, { document: document.value, visibility, note, at: new Date() });
    return json(made, { status: 201, headers: { location: `/api/profiles/${made.id}`, etag: etag(1) } });
  },
);
