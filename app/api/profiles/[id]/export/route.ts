import { etag } from "@/app/api/_http/etag";
import { readsOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { getProfile, getRevision } from "@/db/queries/revisions";
import { idParams } from "@/lib/contracts/page";
import { exportQuery } from "@/lib/contracts/profile";
import { profileDocumentSchema } from "@/lib/profile/document";
import { serialiseDocument } from "@/lib/profile/serialise";
import { fileName } from "@/lib/server/file-name";

export const GET = withRoute(
  {
    role: "anyone",
    summary: "A revision's document as a .porch.json file; the current one unless another is named.",
    params: idParams,
    query: exportQuery,
    response: profileDocumentSchema,
    limit: readsOften,
  },
  async ({ user, params, query }) => {
    const key = { askerId: user?.id ?? null, id: params.id };
    const profile = await getProfile(db, key);
    if (!profile.ok) return respond(profile, { absent: 404 });
    const number = query.revision ?? profile.value.currentRevision;
    const revision = await getRevision(db, { ...key, number });
    if (!revision.ok) return respond(revision, { absent: 404 });
    return new Response(serialiseDocument(revision.value.document), {
      headers: {
        "content-type": "application/json",
        "content-disposition": `attachment; filename="${fileName(profile.value.title)}-${number}.porch.json"`,
        etag: etag(revision.value.documentHash),
      },
    });
  },
);
