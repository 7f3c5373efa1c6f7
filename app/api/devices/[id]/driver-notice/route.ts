import { etag } from "@/app/api/_http/etag";
import { writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { acknowledgeVersion } from "@/db/queries/driver-notices";
import { deviceView } from "@/lib/contracts/device";
import { driverMove } from "@/lib/contracts/driver";
import { idParams } from "@/lib/contracts/page";

export const PUT = withRoute(
  {
    role: "owner",
    summary: "Put the notice of a new driver version aside; the device stays with the one that it has.",
    params: idParams,
    body: driverMove,
    response: deviceView,
    limit: writesOften,
  },
  async ({ user, params, body }) =>
    respond(
      await acknowledgeVersion(db, { ownerId: user.id, id: params.id }, body.version),
      { absent: 404, "no-version": 422, "open-run": 409 },
      ({ version }) => ({ headers: { etag: etag(version) } }),
    ),
);
