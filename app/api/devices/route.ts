import { etag } from "@/app/api/_http/etag";
import { readsOften, writesOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { createDevice, listDevices } from "@/db/queries/devices";
import { devicePage, deviceQuery, deviceView, newDevice } from "@/lib/contracts/device";
import { findDriver } from "@/lib/server/drivers";

export const GET = withRoute(
  {
    role: "owner",
    summary: "The owner's devices, by name.",
    query: deviceQuery,
    response: devicePage,
    limit: readsOften,
  },
  async ({ user, query }) => respond(await listDevices(db, user.id, query), { "bad-cursor": 400 }),
);

export const POST = withRoute(
  { role: "owner", summary: "Add a device.", body: newDevice, response: deviceView, status: 201, limit: writesOften },
  async ({ user, body }) => {
    const driver = await findDriver(db, body.driver);
    if (!driver.ok) return respond(driver, { "no-driver": 422 });
    return respond(await createDevice(db, user.id, body), { known: 409, "no-screen": 422 }, (made) => ({
      status: 201,
      headers: { location: `/api/devices/${made.id}`, etag: etag(made.version) },
    }));
  },
);
