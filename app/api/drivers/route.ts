import { readsOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { listDrivers } from "@/db/queries/drivers";
import { driverPage, driverQuery } from "@/lib/contracts/driver";

export const GET = withRoute(
  {
    role: "anyone",
    summary:
      "Device models that there is a driver for, by maker and model. Maintainers see those without a published version too.",
    query: driverQuery,
    response: driverPage,
    limit: readsOften,
  },
  async ({ user, query }) => respond(await listDrivers(db, user, query), { "bad-cursor": 400 }),
);
