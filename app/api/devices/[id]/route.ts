import { etag } from "@/app/api/_http/etag";
import { expectedVersion } from "@/app/api/_http/expected-version";
import { readsOften, writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { changeDevice, deleteDevice, getDevice } from "@/db/queries/devices";
import { deviceChange, deviceView } from "@/lib/contracts/device";
import { idParams } from "@/lib/contracts/page";

const withEtag = ({ version }: { version: number }) => ({ headers: { etag: etag(version) } });

export const GET = withRoute(
  { role: "owner", summary: "One device.", params: idParams, response: deviceView, limit: readsOften },
  async ({ user, params }) =>
    respond(await getDevice(db, { ownerId: user.id, id: params.id }), { absent: 404 }, withEtag),
);

export const PATCH = withRoute(
  {
    role: "owner",
    summary: "Change a device's name, screen or firmware.",
    params: idParams,
    body: deviceChange,
    response: deviceView,
    limit: writesOften,
  },
  async ({ user, params, body, request }) => {
    const version = expectedVersion(request);
    if (!version.ok) return version.error;
    const changed = await changeDevice(db, { ownerId: user.id, id: params.id, version: version.value }, body);
    return respond(changed, { absent: 404, stale: 412, "no-screen": 422 }, withEtag);
  },
);

export const DELETE = withRoute(
  { role: "owner", summary: "Delete a device with its backups.", params: idParams, status: 204, limit: writesOften },
  async ({ user, params }) =>
    respond(
      await deleteDevice(db, { ownerId: user.id, id: params.id }),
      { absent: 404, "open-run": 409 },
      { status: 204 },
    ),
);
