import { etag } from "@/app/api/_http/etag";
import { readsOften, writesOften } from "@/app/api/_http/limits";
import { problem } from "@/app/api/_http/problem";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { createBackup, listBackups } from "@/db/queries/backups";
import { backupDetail, backupPage, newBackup } from "@/lib/contracts/backup";
import { idParams, pageQuery } from "@/lib/contracts/page";
import { contentFromRead, findDriver, hasSlot } from "@/lib/server/drivers";

/** What a backup is called until its owner names it. */
const names = { "by-hand": "Backup", "before-run": "Before a run", "after-run": "After a run" } as const;

export const GET = withRoute(
  {
    role: "owner",
    summary: "A device's backups, latest first.",
    params: idParams,
    query: pageQuery,
    response: backupPage,
    limit: readsOften,
  },
  async ({ user, params, query }) =>
    respond(await listBackups(db, { ownerId: user.id, deviceId: params.id }, query), {
      absent: 404,
      "bad-cursor": 400,
    }),
);

export const POST = withRoute(
  {
    role: "owner",
    summary: "Store a whole read of a device. Its neutral document is made from the values.",
    params: idParams,
    body: newBackup,
    response: backupDetail,
    status: 201,
    limit: { ...writesOften, bodyBytes: 4_000_000 },
  },
  async ({ user, params, body }) => {
    const driver = await findDriver(db, body.content.driver);
    if (!driver.ok) return respond(driver, { "no-driver": 422 });
    const content = contentFromRead(driver.value, { ...body.content, firmware: body.firmware });
    if (!content.ok) return problem(422, { code: "not-this-driver", errors: content.error });
    if (!hasSlot(driver.value, body.activeSlot)) {
      return problem(422, {
        code: "no-slot",
        errors: [{ path: "activeSlot", message: "The device has no such slot." }],
      });
    }
    const stored = await createBackup(db, user.id, {
      ...body,
      deviceId: params.id,
      name: body.name ?? names[body.cause],
      takenAt: new Date(body.takenAt),
      content: content.value,
    });
    return respond(stored, { absent: 404, "other-driver": 422 }, ({ id, version }) => ({
      status: 201,
      headers: { location: `/api/backups/${id}`, etag: etag(version) },
    }));
  },
);
