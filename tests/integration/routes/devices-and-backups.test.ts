import { sql } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import { GET as compareBackups } from "@/app/api/backups/[id]/compare/route";
import { DELETE as unpin, PUT as pin } from "@/app/api/backups/[id]/known-good/route";
import { DELETE as deleteBackup, GET as getBackup, PATCH as renameBackup } from "@/app/api/backups/[id]/route";
import { POST as undelete } from "@/app/api/backups/[id]/undelete/route";
import { GET as listBackups, POST as postBackup } from "@/app/api/devices/[id]/backups/route";
import { DELETE as deleteDevice, GET as getDevice, PATCH as patchDevice } from "@/app/api/devices/[id]/route";
import { GET as listDevices, POST as postDevice } from "@/app/api/devices/route";
import { DELETE as deleteScreen, GET as getScreen, PATCH as patchScreen } from "@/app/api/screens/[id]/route";
import { POST as postScreen } from "@/app/api/screens/route";
import { db } from "@/db/client";
import type { BackupDetail, BackupView } from "@/lib/contracts/backup";
import type { DeviceView } from "@/lib/contracts/device";
import type { Page } from "@/lib/contracts/page";
import type { TakenBackup } from "@/lib/serial/backup/types";
import {
  addBackup,
  addDevice,
  addScreen,
  backupBody,
  cabinet,
  deviceBody,
  taken,
} from "@/tests/integration/routes/bench";
import { bodyOf, call } from "@/tests/integration/routes/http";
import { person } from "@/tests/integration/routes/people";
import type { Person } from "@/tests/integration/routes/people";

let owner: Person;
let other: Person;
let factory: TakenBackup;
let moved: TakenBackup;

beforeAll(async () => {
  [owner, other] = [await person(), await person()];
  factory = await taken();
  moved = await taken({ "slots[1].placement.offsetPx": 0, "slots[1].colour.brightnessPct": 120, "native.fanPct": 25 });
}, 60_000);

const contents = async () =>
  (await db.execute<{ n: number }>(sql`select count(*)::int as n from backup_content where owner_id = ${owner.id}`))
    .rows[0]?.n;

describe("devices", () => {
  it("knows a device again by driver and serial number, and refuses to add it twice", async () => {
    const body = deviceBody({ serialNumber: "TWICE-1" });
    const first = await call(postDevice, { method: "POST", cookie: owner.cookie, body });
    expect(first.status).toBe(201);
    const again = await call(postDevice, { method: "POST", cookie: owner.cookie, body });
    expect([again.status, (await bodyOf(again)).code]).toEqual([409, "known"]);
    const found = await bodyOf<Page<DeviceView>>(
      await call(listDevices, {
        cookie: owner.cookie,
        path: "/api/devices?driverSlug=lanternfield-lf8&serialNumber=TWICE-1",
      }),
    );
    expect(found.items).toHaveLength(1);
    expect((await call(postDevice, { method: "POST", cookie: other.cookie, body })).status).toBe(201);
  });

  it("stands before a screen of the same owner only", async () => {
    const [mine, theirs] = [await addScreen(owner), await addScreen(other)];
    const device = await addDevice(owner, { screenId: mine.id });
    expect(device.screen).toEqual({ id: mine.id, name: mine.name });
    const answer = await call(patchDevice, {
      method: "PATCH",
      cookie: owner.cookie,
      params: { id: device.id },
      body: { screenId: theirs.id },
    });
    expect([answer.status, (await bodyOf(answer)).code]).toEqual([422, "no-screen"]);
    expect(await bodyOf(await call(getDevice, { cookie: owner.cookie, params: { id: device.id } }))).toMatchObject({
      screen: { id: mine.id },
    });
    expect((await call(deleteScreen, { method: "DELETE", cookie: owner.cookie, params: { id: mine.id } })).status).toBe(
      204,
    );
    expect(await bodyOf(await call(getDevice, { cookie: owner.cookie, params: { id: device.id } }))).toMatchObject({
      screen: null,
    });
  });

  it("is not changed by somebody who saw an older state", async () => {
    const device = await addDevice(owner);
    const change = (name: string, version: number) =>
      call(patchDevice, {
        method: "PATCH",
        cookie: owner.cookie,
        params: { id: device.id },
        body: { name },
        headers: { "if-match": `"${version}"` },
      });
    expect((await change("First", device.version)).status).toBe(200);
    expect((await change("Second", device.version)).status).toBe(412);
    expect(await bodyOf(await call(getDevice, { cookie: owner.cookie, params: { id: device.id } }))).toMatchObject({
      name: "First",
    });
  });

  it("pages by name without losing or repeating one, and refuses a cursor of somebody's own making", async () => {
    const someone = await person();
    for (let made = 0; made < 5; made += 1) await addDevice(someone, { name: `Same name` });
    const seen: string[] = [];
    let cursor: string | null = "";
    for (let pages = 0; cursor !== null && pages < 5; pages += 1) {
      const path: string = `/api/devices?limit=2${cursor === "" ? "" : `&cursor=${cursor}`}`;
      const answer: Page<DeviceView> = await bodyOf(await call(listDevices, { cookie: someone.cookie, path }));
      seen.push(...answer.items.map(({ id }) => id));
      cursor = answer.nextCursor;
    }
    expect(new Set(seen).size).toBe(5);
    expect(seen).toHaveLength(5);
    for (const made of ["x", "W10", Buffer.from('["a","not an id"]').toString("base64url")]) {
      expect((await call(listDevices, { cookie: someone.cookie, path: `/api/devices?cursor=${made}` })).status).toBe(
        400,
      );
    }
  });

  it("is gone with its backups when it is deleted", async () => {
    const device = await addDevice(owner);
    const backup = await addBackup(owner, device.id, factory);
    expect(
      (await call(deleteDevice, { method: "DELETE", cookie: owner.cookie, params: { id: device.id } })).status,
    ).toBe(204);
    expect((await call(getDevice, { cookie: owner.cookie, params: { id: device.id } })).status).toBe(404);
    expect((await call(getBackup, { cookie: owner.cookie, params: { id: backup.id } })).status).toBe(404);
  });
});

describe("screens", () => {
  it("refuses an envelope whose bands are crossed", async () => {
    const envelope = { ...cabinet, bands: [{ lineRateHz: [16_000, 15_000], fieldRateHz: [50, 60] }] };
    const answer = await call(postScreen, { method: "POST", cookie: owner.cookie, body: { envelope } });
    expect(answer.status).toBe(400);
    expect(await bodyOf(answer)).toMatchObject({ errors: [{ path: "envelope.bands[0].lineRateHz" }] });
  });

  it("wants to know which state a change rests on, and refuses a stale one", async () => {
    const screen = await addScreen(owner);
    const change = (headers: Record<string, string>) =>
      call(patchScreen, {
        method: "PATCH",
        cookie: owner.cookie,
        params: { id: screen.id },
        body: { notes: "New" },
        headers,
      });
    expect((await change({})).status).toBe(428);
    expect((await change({ "if-match": 'W/"1"' })).status).toBe(400);
    expect((await change({ "if-match": '"7"' })).status).toBe(412);
    const changed = await change({ "if-match": `"${screen.version}"` });
    expect([changed.status, changed.headers.get("etag")]).toEqual([200, `"${screen.version + 1}"`]);
    expect(await bodyOf(await call(getScreen, { cookie: owner.cookie, params: { id: screen.id } }))).toMatchObject({
      notes: "New",
      version: 2,
    });
  });
});

describe("backups", () => {
  it("gives back every value as the device said it, and the document made from them", async () => {
    const device = await addDevice(owner);
    const stored = await addBackup(owner, device.id, factory, { name: "As delivered" });
    const found = await bodyOf<BackupDetail>(
      await call(getBackup, { cookie: owner.cookie, params: { id: stored.id } }),
    );
    expect(found.content).toEqual(JSON.parse(JSON.stringify(factory.content)));
    expect(found).toMatchObject({
      name: "As delivered",
      activeSlot: 1,
      knownGood: false,
      plans: 0,
      changedValues: null,
    });
    expect(found.rasterOut).toEqual(factory.rasterOut);
  });

  it("stores equal content once for one owner, and counts what changed since the backup before", async () => {
    const device = await addDevice(owner);
    await addBackup(owner, device.id, factory, { takenAt: "2026-10-01T10:00:00Z" });
    const before = await contents();
    await addBackup(owner, device.id, factory, { takenAt: "2026-10-02T10:00:00Z" });
    expect(await contents()).toBe(before);
    await addBackup(owner, device.id, moved, { takenAt: "2026-10-03T10:00:00Z" });
    const list = await bodyOf<Page<BackupView>>(
      await call(listBackups, { cookie: owner.cookie, params: { id: device.id } }),
    );
    expect(list.items.map(({ changedValues }) => changedValues)).toEqual([2, 0, null]);
    const [latest, , first] = list.items;
    const compared = await call(compareBackups, {
      cookie: owner.cookie,
      params: { id: first?.id ?? "" },
      path: `/x?with=${latest?.id ?? ""}`,
    });
    expect(await bodyOf(compared)).toMatchObject({
      changes: [{ path: "slots[1].colour.brightnessPct", left: 100, right: 120, unit: "%" }],
      native: [{ key: "native.fanPct", left: 40, right: 25 }],
    });
  });

  it("refuses a read that is not one of this driver, and stores nothing of it", async () => {
    const device = await addDevice(owner);
    const post = (body: unknown) =>
      call(postBackup, { method: "POST", cookie: owner.cookie, params: { id: device.id }, body });
    const whole = backupBody(factory) as { content: { values: Record<string, number | string> } };
    const { "native.fanPct": _fan, ...missing } = whole.content.values;
    const wrong = [
      [
        { ...whole, content: { ...whole.content, values: { ...whole.content.values, "slots[99].name": "x" } } },
        422,
        "not-this-driver",
      ],
      [{ ...whole, content: { ...whole.content, values: missing } }, 422, "not-this-driver"],
      [
        { ...whole, content: { ...whole.content, driver: { slug: "lanternfield-lf8", version: "99.0.0" } } },
        422,
        "no-driver",
      ],
      [{ ...whole, activeSlot: 9 }, 422, "no-slot"],
      [{ ...whole, content: { ...whole.content, values: { "native.fanPct": 0.5 } } }, 400, undefined],
      [{ ...whole, takenAt: "yesterday" }, 400, undefined],
    ] as const;
    for (const [body, status, code] of wrong) {
      const answer = await post(body);
      expect([answer.status, (await bodyOf(answer)).code]).toEqual([status, code]);
    }
    const list = await bodyOf<Page<BackupView>>(
      await call(listBackups, { cookie: owner.cookie, params: { id: device.id } }),
    );
    expect(list.items).toEqual([]);
  });

  it("refuses a body that is too large before it is read", async () => {
    const device = await addDevice(owner);
    const answer = await call(postBackup, {
      method: "POST",
      cookie: owner.cookie,
      params: { id: device.id },
      text: `{"x":"${"a".repeat(4_000_001)}"}`,
    });
    expect(answer.status).toBe(413);
  });

  it("is renamed, deleted, and there again after an undo", async () => {
    const device = await addDevice(owner);
    const { id } = await addBackup(owner, device.id, factory);
    const key = { cookie: owner.cookie, params: { id } };
    expect(
      await bodyOf(await call(renameBackup, { ...key, method: "PATCH", body: { name: " Opening night " } })),
    ).toMatchObject({ name: "Opening night", version: 2 });
    expect((await call(renameBackup, { ...key, method: "PATCH", body: { name: "line\nbreak" } })).status).toBe(400);
    expect((await call(deleteBackup, { ...key, method: "DELETE" })).status).toBe(204);
    expect((await call(getBackup, key)).status).toBe(404);
    expect((await call(undelete, { ...key, method: "POST" })).status).toBe(200);
    expect(await bodyOf(await call(getBackup, key))).toMatchObject({ name: "Opening night" });
  });

  it("keeps the known good one from being deleted, and tells when the device differs from it", async () => {
    const device = await addDevice(owner);
    const first = await addBackup(owner, device.id, factory, { takenAt: "2026-10-01T10:00:00Z" });
    const key = { cookie: owner.cookie, params: { id: first.id } };
    expect(await bodyOf(await call(pin, { ...key, method: "PUT" }))).toMatchObject({ knownGood: true });
    const refused = await call(deleteBackup, { ...key, method: "DELETE" });
    expect([refused.status, (await bodyOf(refused)).code]).toEqual([409, "in-use"]);
    const view = async () =>
      bodyOf<DeviceView>(await call(getDevice, { cookie: owner.cookie, params: { id: device.id } }));
    expect((await view()).differsFromKnownGood).toBe(false);
    await addBackup(owner, device.id, moved, { takenAt: "2026-10-04T10:00:00Z" });
    expect(await view()).toMatchObject({ differsFromKnownGood: true, knownGoodBackupId: first.id });
    expect((await call(unpin, { ...key, method: "DELETE" })).status).toBe(200);
    expect((await call(deleteBackup, { ...key, method: "DELETE" })).status).toBe(204);
  });

  it("answers a repeated request with the same key by the same backup", async () => {
    const device = await addDevice(owner);
    const headers = { "idempotency-key": "one-backup" };
    const post = () =>
      call(postBackup, {
        method: "POST",
        cookie: owner.cookie,
        params: { id: device.id },
        body: backupBody(factory),
        headers,
        path: `/api/devices/${device.id}/backups`,
      });
    const [first, second] = [await bodyOf<BackupView>(await post()), await bodyOf<BackupView>(await post())];
    expect(second.id).toBe(first.id);
    const list = await bodyOf<Page<BackupView>>(
      await call(listBackups, { cookie: owner.cookie, params: { id: device.id } }),
    );
    expect(list.items).toHaveLength(1);
  });
});
