import { sql } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import { GET as exportProfile } from "@/app/api/profiles/[id]/export/route";
import { GET as getRevision } from "@/app/api/profiles/[id]/revisions/[number]/route";
import { GET as listRevisions, POST as addRevision } from "@/app/api/profiles/[id]/revisions/route";
import { DELETE as deleteProfile, GET as getProfile, PATCH as patchProfile } from "@/app/api/profiles/[id]/route";
import { POST as importProfile } from "@/app/api/profiles/import/route";
import { GET as listProfiles, POST as postProfile } from "@/app/api/profiles/route";
import { db } from "@/db/client";
import { demoProfiles } from "@/db/demo/seed-profiles";
import type { Page } from "@/lib/contracts/page";
import type {
  ImportAnswer,
  ProfileDetail,
  ProfileSummary,
  RevisionDetail,
  RevisionView,
} from "@/lib/contracts/profile";
import { hashDocument } from "@/lib/profile/canonical";
import type { ProfileDocument } from "@/lib/profile/document";
import { addBackup, addDevice, addScreen, taken } from "@/tests/integration/routes/bench";
import { bodyOf, call } from "@/tests/integration/routes/http";
import { person } from "@/tests/integration/routes/people";
import type { Person } from "@/tests/integration/routes/people";

let owner: Person;
let other: Person;

beforeAll(async () => {
  [owner, other] = [await person(), await person()];
});

function document(title: string, key = "upright-240"): ProfileDocument {
  const found = demoProfiles.find((one) => one.key === key)?.revisions.at(-1)?.document;
  if (found === undefined) throw new Error(key);
  return { ...found, title };
}

async function publish(body: object, by = owner): Promise<ProfileDetail> {
  const answer = await call(postProfile, {
    method: "POST",
    cookie: by.cookie,
    body: { visibility: "shared", ...body },
  });
  if (answer.status !== 201) throw new Error(await answer.text());
  return bodyOf(answer);
}

async function titles(path: string, cookie?: string): Promise<string[]> {
  const list = await bodyOf<Page<ProfileSummary>>(
    await call(listProfiles, { path: `/api/profiles?limit=100${path}`, cookie }),
  );
  return list.items.map(({ title }) => title);
}

describe("profiles", () => {
  it("carry who, when and what hash from the server, whatever the document said", async () => {
    const lying = { ...document("Provenance"), provenance: { by: "Somebody famous", contentHash: "0" } };
    const made = await publish({ document: lying });
    expect(made.revision.document.provenance).toMatchObject({ by: owner.name, contentHash: hashDocument(lying) });
    expect(made.revision.documentHash).toBe(hashDocument(made.revision.document));
    expect(made).toMatchObject({ mine: true, currentRevision: 1, title: "Provenance" });
  });

  it("that are private are there for their owner alone", async () => {
    const { id } = await publish({ document: document("My draft"), visibility: "private" });
    for (const cookie of [undefined, other.cookie]) {
      expect((await call(getProfile, { cookie, params: { id } })).status).toBe(404);
      expect((await call(listRevisions, { cookie, params: { id } })).status).toBe(404);
      expect((await call(getRevision, { cookie, params: { id, number: "1" } })).status).toBe(404);
      expect((await call(exportProfile, { cookie, params: { id } })).status).toBe(404);
      expect(await titles("", cookie)).not.toContain("My draft");
    }
    expect(await titles("&mine=true", owner.cookie)).toContain("My draft");
    expect(
      (
        await call(patchProfile, {
          method: "PATCH",
          cookie: owner.cookie,
          params: { id },
          body: { visibility: "shared" },
        })
      ).status,
    ).toBe(200);
    expect((await call(getProfile, { params: { id } })).status).toBe(200);
  });

  it("that are shared are changed by their owner alone", async () => {
    const { id } = await publish({ document: document("Shared") });
    const headers = { "if-match": '"1"' };
    const params = { id };
    const body = { document: document("Taken over") };
    expect((await call(addRevision, { method: "POST", cookie: other.cookie, params, body, headers })).status).toBe(403);
    expect(
      (await call(patchProfile, { method: "PATCH", cookie: other.cookie, params, body: { visibility: "private" } }))
        .status,
    ).toBe(403);
    expect((await call(deleteProfile, { method: "DELETE", cookie: other.cookie, params })).status).toBe(403);
    expect(await bodyOf(await call(getProfile, { params }))).toMatchObject({
      title: "Shared",
      currentRevision: 1,
      mine: false,
    });
    expect((await call(deleteProfile, { method: "DELETE", cookie: owner.cookie, params })).status).toBe(204);
    expect((await call(getProfile, { params })).status).toBe(404);
  });

  it("grow by revisions that follow the current one, of two at once only by the first", async () => {
    const { id } = await publish({ document: document("Grows") });
    const add = (title: string, after: string | null) =>
      call(addRevision, {
        method: "POST",
        cookie: owner.cookie,
        params: { id },
        body: { document: document(title), note: title },
        headers: after === null ? {} : { "if-match": after },
      });
    expect((await add("Blind", null)).status).toBe(428);
    const answers = await Promise.all([add("Second", '"1"'), add("Also second", '"1"')]);
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 412]);
    expect((await add("Stale", '"1"')).status).toBe(412);
    expect((await add("Third", '"2"')).headers.get("etag")).toBe('"3"');
    const list = await bodyOf<Page<RevisionView>>(await call(listRevisions, { params: { id }, path: "/x?limit=2" }));
    expect(list.items.map(({ number }) => number)).toEqual([3, 2]);
    const rest = await bodyOf<Page<RevisionView>>(
      await call(listRevisions, { params: { id }, path: `/x?limit=2&cursor=${list.nextCursor}` }),
    );
    expect([rest.items.map(({ number }) => number), rest.nextCursor]).toEqual([[1], null]);
    const first = await bodyOf<RevisionDetail>(await call(getRevision, { params: { id, number: "1" } }));
    expect(first.document.title).toBe("Grows");
    expect((await call(getRevision, { params: { id, number: "4" } })).status).toBe(404);
    const third = await bodyOf<RevisionDetail>(await call(getRevision, { params: { id, number: "3" } }));
    expect(third.document.provenance?.parentRevision).toBe(list.items[1]?.id);
  });

  it("have revisions that even the database does not change", async () => {
    const { revision } = await publish({ document: document("Fixed") });
    await expect(db.execute(sql`update revision set note = 'other' where id = ${revision.id}`)).rejects.toThrow();
  });

  it("are found by beginnings of words, whatever somebody types", async () => {
    await publish({ document: { ...document("Zephyr cabinet, 240 lines"), summary: "Ångström spacing" } });
    expect(await titles("&q=zeph")).toEqual(["Zephyr cabinet, 240 lines"]);
    expect(await titles("&q=LINES%20zephyr")).toEqual(["Zephyr cabinet, 240 lines"]);
    expect(await titles(`&q=${encodeURIComponent("ångs")}`)).toEqual(["Zephyr cabinet, 240 lines"]);
    expect(await titles("&q=zephyr%20absent")).toEqual([]);
    for (const odd of ["'; drop table profile; --", "a & | ! ( ) :* <->", "\\", "%00", "\u{1F600}"]) {
      expect((await call(listProfiles, { path: `/api/profiles?q=${encodeURIComponent(odd)}` })).status).toBe(200);
    }
  });

  it("say how many of their modes a screen takes, and are left out where it takes none", async () => {
    const screen = await addScreen(owner);
    await publish({ document: document("Slow one") });
    await publish({ document: document("Fast one", "monitor-31k") });
    const list = await bodyOf<Page<ProfileSummary>>(
      await call(listProfiles, { cookie: owner.cookie, path: `/api/profiles?limit=100&screenId=${screen.id}` }),
    );
    const fit = (title: string) => list.items.find((item) => item.title === title)?.fit;
    expect([fit("Slow one"), fit("Fast one")]).toEqual([
      { modes: 1, fitting: 1 },
      { modes: 2, fitting: 0 },
    ]);
    const fitting = await titles(`&screenId=${screen.id}&fitting=true`, owner.cookie);
    expect(fitting).toContain("Slow one");
    expect(fitting).not.toContain("Fast one");
    expect(
      (await call(listProfiles, { cookie: other.cookie, path: `/api/profiles?screenId=${screen.id}` })).status,
    ).toBe(422);
  });

  it("are made of some slots of a backup, with the modes they use and the screen they were made for", async () => {
    const screen = await addScreen(owner);
    const device = await addDevice(owner, { screenId: screen.id });
    const backup = await addBackup(
      owner,
      device.id,
      await taken({ "slots[3].name": "European tapes", "everywhere.trim.topLines": 4 }),
    );
    const made = await publish({ fromBackup: backup.id, slots: [1, 3], title: "From my device", summary: "Two slots" });
    const published = made.revision.document;
    expect(published.slots?.map(({ number, mode }) => [number, mode])).toEqual([
      [1, "1"],
      [3, "3"],
    ]);
    expect(published.modes?.map(({ key }) => key)).toEqual(["1", "3"]);
    expect(published.everywhere).toEqual({ trim: { leftPx: 0, rightPx: 0, topLines: 4, bottomLines: 0 } });
    expect(published.madeFor).toMatchObject({
      driver: { slug: "lanternfield-lf8", firmware: "3.2" },
      screen: { name: screen.name },
    });
    const publishAs = (by: Person, slots: number[]) =>
      call(postProfile, {
        method: "POST",
        cookie: by.cookie,
        body: { fromBackup: backup.id, slots, title: "No", visibility: "shared" },
      });
    expect((await publishAs(owner, [8])).status).toBe(422);
    expect((await publishAs(other, [1])).status).toBe(404);
  });

  it("come out as a file and in again without loss", async () => {
    const original = { ...document("There and back"), laterField: { kept: [1, "two"] } };
    const { id } = await publish({ document: original });
    const file = await call(exportProfile, { params: { id } });
    expect(file.headers.get("content-disposition")).toBe('attachment; filename="there-and-back-1.porch.json"');
    const text = await file.text();
    const answer = await call(importProfile, { method: "POST", cookie: other.cookie, text });
    expect(answer.status).toBe(201);
    const { profile, unknownFields } = await bodyOf<ImportAnswer>(answer);
    expect(hashDocument(profile.revision.document)).toBe(hashDocument(original));
    expect(unknownFields.map(({ path }) => path)).toEqual(["laterField"]);
    expect(profile).toMatchObject({ visibility: "private", mine: true });
  });

  it("are not made of a malformed file: each complaint says where, and nothing is stored", async () => {
    const { rows: before } = await db.execute(sql`select count(*) from profile`);
    const whole = document("Wrong");
    for (const [text, status, path] of [
      ["{", 422, ""],
      ["[]", 422, ""],
      [JSON.stringify({ ...whole, version: 2 }), 422, "version"],
      [JSON.stringify({ ...whole, format: "other" }), 422, "format"],
      [JSON.stringify({ ...whole, slots: [{ number: "one" }] }), 422, "slots[0].number"],
      [JSON.stringify({ ...whole, title: "line\nbreak" }), 422, "title"],
      ["[".repeat(100) + "]".repeat(100), 422, ""],
      [JSON.stringify({ ...whole, notes: "n".repeat(1_200_000) }), 413, undefined],
    ] as const) {
      const answer = await call(importProfile, { method: "POST", cookie: owner.cookie, text });
      const body = await bodyOf<{ errors?: { path: string }[] }>(answer);
      expect([answer.status, body.errors?.[0]?.path]).toEqual([status, path]);
    }
    const binary = await call(importProfile, {
      method: "POST",
      cookie: owner.cookie,
      text: "{}",
      headers: { "content-type": "text/html" },
    });
    expect(binary.status).toBe(415);
    expect((await db.execute(sql`select count(*) from profile`)).rows).toEqual(before);
  });
});
