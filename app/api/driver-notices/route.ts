import { readsOften } from "@/app/api/_http/limits";
import { json } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { listNotices } from "@/db/queries/driver-notices";
import { driverNoticeList } from "@/lib/contracts/driver";

export const GET = withRoute(
  {
    role: "owner",
    summary:
      "The owner's devices whose driver has a new version that was not acknowledged, or whose version was withdrawn.",
    response: driverNoticeList,
    limit: readsOften,
  },
  async ({ user }) => json({ items: await listNotices(db, user.id) }),
);
