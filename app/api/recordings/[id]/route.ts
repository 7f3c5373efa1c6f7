import { readsOften, writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { deleteRecording, getRecording } from "@/db/queries/recordings";
import { idParams } from "@/lib/contracts/page";
import { recordingView } from "@/lib/contracts/recording";

export const GET = withRoute(
  {
    role: "owner",
    summary: "What a recording is; its lines are its file.",
    params: idParams,
    response: recordingView,
    limit: readsOften,
  },
  async ({ user, params }) => respond(await getRecording(db, user, params.id), { absent: 404 }),
);

export const DELETE = withRoute(
  {
    role: "owner",
    summary: "Take one's own recording out of every list.",
    params: idParams,
    status: 204,
    limit: writesOften,
  },
  async ({ user, params }) =>
    respond(await deleteRecording(db, { ownerId: user.id, id: params.id }), { absent: 404 }, { status: 204 }),
);
