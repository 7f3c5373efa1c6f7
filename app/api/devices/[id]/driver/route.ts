import { etag } from "@/app/api/_http/etag";
import { readsOften, writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { moveDevice } from "@/db/queries/driver-notices";
import { deviceView } from "@/lib/contracts/device";
import { driverMove, driverMovePreview, moveQuery } from "@/lib/contracts/driver";
import { idParams } from "@/lib/contracts/page";
import { previewMove } from "@/lib/server/driver-move";

export const GET = withRoute(
  {
    role: "owner",
    summary:
      "What another version of its driver says differently, and what it would read differently in the device's last backup.",
    params: idParams,
    query: moveQuery,
    response: driverMovePreview,
    limit: readsOften,
  },
  async ({ user, params, query }) =>
    respond(await previewMove(db, { ownerId: user.id, id: params.id }, query.to), { absent: 404, "no-version": 422 }),
);

export const PUT = withRoute(
  {
    role: "owner",
    summary: "Move a device to a published version of its driver.",
    params: idParams,
    body: driverMove,
    response: deviceView,
    limit: writesOften,
  },
  async ({ user, params, body }) =>
    respond(
      await moveDevice(db, { ownerId: user.id, id: params.id }, body.version),
      { absent: 404, "no-version": 422, "open-run": 409 },
      ({ version }) => ({ headers: { etag: etag(version) } }),
    ),
);
