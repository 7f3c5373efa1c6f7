import { readsOften, writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { createRecording, listRecordings } from "@/db/queries/recordings";
import {
  newRecordingQuery,
  recordingBytes,
  recordingPage,
  recordingQuery,
  recordingView,
} from "@/lib/contracts/recording";
import { readUpload } from "@/lib/server/upload-recording";

export const GET = withRoute(
  {
    role: "owner",
    summary: "One's own recordings, latest first; for maintainers also those that are attached to a question.",
    query: recordingQuery,
    response: recordingPage,
    limit: readsOften,
  },
  async ({ user, query }) => respond(await listRecordings(db, user, query), { "bad-cursor": 400 }),
);

export const POST = withRoute(
  {
    role: "owner",
    summary:
      "Store a recording, which is the body as JSON Lines. With strikeOut, names and serial numbers are taken out first.",
    query: newRecordingQuery,
    rawBody: ["application/x-ndjson", "application/jsonl", "application/octet-stream", "text/plain"],
    response: recordingView,
    status: 201,
    limit: { ...writesOften, bodyBytes: recordingBytes },
  },
  async ({ user, query, body }) => {
    const read = await readUpload(db, user, body, { strikeOut: query.strikeOut === "true" });
    if (!read.ok) return respond(read, { "not-a-recording": 422, "no-driver": 422 });
    const stored = await createRecording(db, user.id, { ...read.value, name: query.name, deviceId: query.deviceId });
    return respond(stored, { "no-device": 422, "too-many": 409 }, ({ id }) => ({
      status: 201,
      headers: { location: `/api/recordings/${id}` },
    }));
  },
);
