import { etag } from "@/app/api/_http/etag";
import { documentBytes, writesOften } from "@/app/api/_http/limits";
import { problem } from "@/app/api/_http/problem";
import { json } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { createProfile } from "@/db/queries/publish";
import { importAnswer } from "@/lib/contracts/profile";
import { readDocument } from "@/lib/server/read-document";

export const POST = withRoute(
  {
    role: "owner",
    summary: "Make a private profile of a .porch.json file, which is the body.",
    rawBody: ["application/json", "application/octet-stream"],
    response: importAnswer,
    status: 201,
    limit: { ...writesOften, bodyBytes: documentBytes },
  },
  async ({ user, body }) => {
    const read = readDocument(body);
    if (!read.ok) return problem(422, { code: "not-a-profile", errors: read.error });
    const { document, unknownFields } = read.value;
    const titled = { ...document, title: (document.title ?? "").trim() === "" ? "Imported profile" : document.title };
    const profile = await createProfile(db, user, {
      document: titled,
      visibility: "private",
      note: "Imported",
      at: new Date(),
    });
    return json(
      { profile, unknownFields },
      { status: 201, headers: { location: `/api/profiles/${profile.id}`, etag: etag(1) } },
    );
  },
);
