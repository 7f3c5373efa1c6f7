import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { revokeSession } from "@/db/queries/sessions";
import { idParams } from "@/lib/contracts/page";

export const DELETE = withRoute(
  { role: "owner", summary: "Sign one of the person's sessions out.", params: idParams, status: 204 },
  async ({ user, params }) =>
    respond(await revokeSession(db, { userId: user.id, id: params.id }), { absent: 404 }, { status: 204 }),
);
