import { z } from "zod";
import { readsOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { readRecording } from "@/db/queries/recordings";
import { idParams } from "@/lib/contracts/page";
import { fileName } from "@/lib/server/file-name";

export const GET = withRoute(
  {
    role: "owner",
    summary: "A recording as a file of JSON Lines.",
    params: idParams,
    response: z.string(),
    limit: readsOften,
  },
  async ({ user, params }) => {
    const stored = await readRecording(db, user, params.id);
    if (!stored.ok) return respond(stored, { absent: 404 });
    return new Response(stored.value.content, {
      headers: {
        "content-type": "application/x-ndjson",
        "content-disposition": `attachment; filename="${fileName(stored.value.name)}.jsonl"`,
      },
    });
  },
);
