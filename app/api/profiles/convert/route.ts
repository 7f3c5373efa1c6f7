import { documentBytes } from "@/app/api/_http/limits";
import { problem } from "@/app/api/_http/problem";
import { withRoute } from "@/app/api/_http/with-route";
import { convertQuery } from "@/lib/contracts/check";
import { profileDocumentSchema } from "@/lib/profile/document";
import { serialiseDocument } from "@/lib/profile/serialise";
import { readDocument } from "@/lib/server/read-document";

export const POST = withRoute(
  {
    role: "anyone",
    summary: "A document in its byte-stable form.",
    query: convertQuery,
    rawBody: ["application/json"],
    response: profileDocumentSchema,
    limit: { bodyBytes: documentBytes },
  },
  ({ body }) => {
    const read = readDocument(body);
    if (!read.ok) return problem(422, { code: "not-a-profile", errors: read.error });
    return new Response(serialiseDocument(read.value.document), { headers: { "content-type": "application/json" } });
  },
);
