import { sql } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import { declarationOf, routeMethods } from "@/app/api/_http/openapi";
import { routeModules } from "@/app/api/openapi.json/routes";
import { db } from "@/db/client";
import { demoProfiles } from "@/db/demo/seed-profiles";
import type { BackupDetail } from "@/lib/contracts/backup";
import type { DeviceView } from "@/lib/contracts/device";
import type { PlanView } from "@/lib/contracts/plan";
import type { ProfileDetail } from "@/lib/contracts/profile";
import type { RunView } from "@/lib/contracts/run";
import type { ScreenView } from "@/lib/contracts/screen";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { planChanges } from "@/lib/serial/plan/plan-changes";
import { standardRaster } from "@/lib/timing/standards";
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
import type { Call } from "@/tests/integration/routes/http";
import { person } from "@/tests/integration/routes/people";
import type { Person } from "@/tests/integration/routes/people";

type Handler = Parameters<typeof call>[0];

/** Everything that one owner has, private, with a run that is open. */
type Belongings = {
  readonly owner: Person;
  readonly screen: ScreenView;
  readonly device: DeviceView;
  readonly backup: BackupDetail;
  readonly spare: BackupDetail;
  readonly profile: ProfileDetail;
  readonly plan: PlanView;
  readonly run: RunView;
  readonly session: string;
};

/**
 * What a valid request to a route is, and what it comes to for the owner of what it names and for anybody else
 * who is signed in, whatever their role.
 */
type Walk = {
  readonly given: (of: Belongings) => Call;
  readonly owner: number;
  readonly others: number;
  readonly nobody?: number;
};

let its: Belongings;
let others: ReadonlyMap<string, Person>;
const document = demoProfiles.find(({ key }) => key === "upright-240")?.revisions.at(-1)?.document;
const id = (of: { readonly id: string }, more: Call = {}): Call => ({ params: { id: of.id }, ...more });

/** In an order in which each finds what it needs: what deletes comes last. */
const walks: Readonly<Record<string, Walk>> = {
  "GET /api/health": { given: () => ({}), owner: 200, others: 200, nobody: 200 },
  "POST /api/timing/describe": {
    given: () => ({ body: { timing: standardRaster("240p60").timing } }),
    owner: 200,
    others: 200,
    nobody: 200,
  },
  "POST /api/profiles/check": { given: () => ({ body: { document } }), owner: 200, others: 200, nobody: 200 },
  "POST /api/profiles/compare": {
    given: () => ({ body: { left: document, right: document } }),
    owner: 200,
    others: 200,
    nobody: 200,
  },
  "POST /api/profiles/convert": {
    given: () => ({ body: document, path: "/x?to=json" }),
    owner: 200,
    others: 200,
    nobody: 200,
  },
  "POST /api/account": {
    given: () => ({ body: { name: "N", email: "walk@example.org", password: "long enough words" } }),
    owner: 202,
    others: 202,
    nobody: 202,
  },
  "POST /api/sessions": {
    given: () => ({ body: { email: "nobody@example.org", password: "long enough words" } }),
    owner: 401,
    others: 401,
    nobody: 401,
  },
  "GET /api/account": { given: () => ({}), owner: 200, others: 200 },
  "PATCH /api/account": { given: () => ({ body: { name: "Renamed" } }), owner: 200, others: 200 },
  "PUT /api/account/password": {
    given: () => ({ body: { current: "no password here", next: "long enough words" } }),
    owner: 422,
    others: 422,
  },
  "GET /api/sessions": { given: () => ({}), owner: 200, others: 200 },
  "GET /api/screens": { given: () => ({}), owner: 200, others: 200 },
  "POST /api/screens": { given: () => ({ body: { envelope: cabinet } }), owner: 201, others: 201 },
  "GET /api/screens/{id}": { given: ({ screen }) => id(screen), owner: 200, others: 404 },
  "PATCH /api/screens/{id}": {
    given: ({ screen }) => id(screen, { body: { notes: "Walked" }, headers: { "if-match": '"1"' } }),
    owner: 200,
    others: 404,
  },
  "GET /api/devices": { given: () => ({}), owner: 200, others: 200 },
  "POST /api/devices": {
    given: ({ screen }) => ({ body: deviceBody({ screenId: screen.id }) }),
    owner: 201,
    others: 422,
  },
  "GET /api/devices/{id}": { given: ({ device }) => id(device), owner: 200, others: 404 },
  "PATCH /api/devices/{id}": {
    given: ({ device }) => id(device, { body: { name: "Walked" } }),
    owner: 200,
    others: 404,
  },
  "GET /api/devices/{id}/backups": { given: ({ device }) => id(device), owner: 200, others: 404 },
  "POST /api/devices/{id}/backups": {
    given: ({ device, backup }) => id(device, { body: backupBody(backup) }),
    owner: 201,
    others: 404,
  },
  "GET /api/backups/{id}": { given: ({ backup }) => id(backup), owner: 200, others: 404 },
  "GET /api/backups/{id}/compare": {
    given: ({ backup, spare }) => id(backup, { path: `/x?with=${spare.id}` }),
    owner: 200,
    others: 404,
  },
  "PATCH /api/backups/{id}": {
    given: ({ backup }) => id(backup, { body: { name: "Walked" } }),
    owner: 200,
    others: 404,
  },
  "PUT /api/backups/{id}/known-good": { given: ({ spare }) => id(spare), owner: 200, others: 404 },
  "DELETE /api/backups/{id}/known-good": { given: ({ spare }) => id(spare), owner: 200, others: 404 },
  "DELETE /api/backups/{id}": { given: ({ spare }) => id(spare), owner: 204, others: 404 },
  "POST /api/backups/{id}/undelete": { given: ({ spare }) => id(spare), owner: 200, others: 404 },
  "GET /api/profiles": { given: () => ({}), owner: 200, others: 200, nobody: 200 },
  "POST /api/profiles": {
    given: ({ backup }) => ({ body: { fromBackup: backup.id, slots: [1], title: "Walked", visibility: "private" } }),
    owner: 201,
    others: 404,
  },
  "POST /api/profiles/import": { given: () => ({ body: document }), owner: 201, others: 201 },
  "GET /api/profiles/{id}": { given: ({ profile }) => id(profile), owner: 200, others: 404, nobody: 404 },
  "GET /api/profiles/{id}/export": { given: ({ profile }) => id(profile), owner: 200, others: 404, nobody: 404 },
  "GET /api/profiles/{id}/revisions": { given: ({ profile }) => id(profile), owner: 200, others: 404, nobody: 404 },
  "GET /api/profiles/{id}/revisions/{number}": {
    given: ({ profile }) => ({ params: { id: profile.id, number: "1" } }),
    owner: 200,
    others: 404,
    nobody: 404,
  },
  "POST /api/profiles/{id}/revisions": {
    given: ({ profile }) => id(profile, { body: { document }, headers: { "if-match": '"1"' } }),
    owner: 201,
    others: 404,
  },
  "PATCH /api/profiles/{id}": {
    given: ({ profile }) => id(profile, { body: { visibility: "private" } }),
    owner: 200,
    others: 404,
  },
  "DELETE /api/profiles/{id}": { given: ({ profile }) => id(profile), owner: 204, others: 404 },
  "POST /api/plans": {
    given: ({ backup, profile, screen }) => ({
      body: {
        backupId: backup.id,
        target: { kind: "revision", revisionId: profile.revision.id },
        leftOut: [],
        screen: { id: screen.id },
        acknowledged: [],
        hash: "0".repeat(64),
      },
    }),
    // By then the profile is deleted, so even its owner gets no plan of it.
    owner: 422,
    others: 404,
  },
  "GET /api/plans/{id}": { given: ({ plan }) => id(plan), owner: 200, others: 404 },
  "GET /api/runs": { given: () => ({}), owner: 200, others: 200 },
  "POST /api/runs": {
    given: ({ plan }) => ({
      body: { planId: plan.id, holder: "walking-tab" },
      headers: { "if-match": `"${plan.hash}"` },
    }),
    owner: 409,
    others: 404,
  },
  "GET /api/runs/{id}": { given: ({ run }) => id(run), owner: 200, others: 404 },
  "GET /api/runs/{id}/steps": { given: ({ run }) => id(run), owner: 200, others: 404 },
  "POST /api/runs/{id}/steps": {
    given: ({ run }) =>
      id(run, {
        body: { holder: "walking-tab", entries: [{ number: 0, atMs: 1, kind: "state", state: "called-off" }] },
      }),
    owner: 200,
    others: 404,
  },
  "PUT /api/runs/{id}/holder": {
    given: ({ run }) => id(run, { body: { holder: "another-tab", force: true } }),
    owner: 409,
    others: 404,
  },
  "POST /api/runs/{id}/closing": {
    given: ({ run, spare }) => id(run, { body: { afterBackupId: spare.id } }),
    owner: 200,
    others: 404,
  },
  "DELETE /api/screens/{id}": { given: ({ screen }) => id(screen), owner: 204, others: 404 },
  "DELETE /api/devices/{id}": { given: ({ device }) => id(device), owner: 204, others: 404 },
  "DELETE /api/sessions/{id}": { given: ({ session }) => ({ params: { id: session } }), owner: 204, others: 404 },
  "DELETE /api/sessions": { given: () => ({}), owner: 200, others: 200 },
  "DELETE /api/sessions/current": { given: () => ({}), owner: 204, others: 204 },
};

function handlerOf(name: string): Handler {
  const [method = "", path = ""] = name.split(" ");
  // The cast holds: the test below compares the names with the handlers that stand.
  return routeModules[path]?.[method] as Handler;
}

let addresses = 0;

function ask(name: string, walk: Walk, cookie?: string): Promise<Response> {
  const given = walk.given(its);
  addresses += 1;
  const headers = { "x-forwarded-for": `2001:db8:${addresses.toString(16)}::1`, ...given.headers };
  return call(handlerOf(name), { ...given, method: name.split(" ")[0], headers, cookie });
}

/** All that belongs to the owner, as text. */
async function snapshot(): Promise<string> {
  const { rows } = await db.execute<{ everything: string }>(sql`
    select concat_ws(' ',
      (select string_agg(t::text, ' ' order by id) from screen t where owner_id = ${its.owner.id}),
      (select string_agg(t::text, ' ' order by id) from device t where owner_id = ${its.owner.id}),
      (select string_agg(t::text, ' ' order by id) from backup t where owner_id = ${its.owner.id}),
      (select string_agg(t::text, ' ' order by id) from profile t where owner_id = ${its.owner.id}),
      (select string_agg(t::text, ' ' order by r.id) from revision r join profile t on t.id = r.profile_id where owner_id = ${its.owner.id}),
      (select string_agg(t::text, ' ' order by id) from plan t where owner_id = ${its.owner.id}),
      (select string_agg(t::text, ' ' order by id) from run t where owner_id = ${its.owner.id}),
      (select string_agg(session_token, ' ' order by id) from session where user_id = ${its.owner.id}),
      (select name from "user" where id = ${its.owner.id})) as everything`);
  return rows[0]?.everything ?? "";
}

async function belongings(): Promise<Belongings> {
  const owner = await person();
  const screen = await addScreen(owner);
  const device = await addDevice(owner, { screenId: screen.id });
  const [backup, spare] = [
    await addBackup(owner, device.id, await taken()),
    await addBackup(owner, device.id, await taken({ "native.fanPct": 30 })),
  ];
  const post = async <T>(name: string, body: object, headers: Record<string, string> = {}): Promise<T> => {
    const answer = await call(handlerOf(name), { method: "POST", cookie: owner.cookie, body, headers });
    if (answer.status !== 201) throw new Error(`${name} ${await answer.text()}`);
    return bodyOf<T>(answer);
  };
  const profile = await post<ProfileDetail>("POST /api/profiles", { document, visibility: "private" });
  const { content, arriving, activeSlot, rasterOut } = backup;
  const planned = (acknowledged: readonly string[]) =>
    planChanges({
      backup: content,
      target: { kind: "profile", document: profile.revision.document },
      leftOut: [],
      driver: lanternfieldLf8,
      screen: screen.envelope,
      source: arriving,
      activeSlot,
      rasterOut,
      acknowledged,
    });
  const { toAcknowledge } = planned([]);
  const plan = await post<PlanView>("POST /api/plans", {
    backupId: backup.id,
    target: { kind: "revision", revisionId: profile.revision.id },
    leftOut: [],
    screen: { id: screen.id },
    acknowledged: toAcknowledge,
    hash: planned(toAcknowledge).plan?.hash,
  });
  const run = await post<RunView>(
    "POST /api/runs",
    { planId: plan.id, holder: "walking-tab" },
    { "if-match": `"${plan.hash}"` },
  );
  const second = await db.execute<{ id: string }>(sql`
    insert into session (session_token, user_id, expires) values ('a second browser', ${owner.id}, now() + interval '1 day') returning id`);
  return { owner, screen, device, backup, spare, profile, plan, run, session: second.rows[0]?.id ?? "" };
}

beforeAll(async () => {
  its = await belongings();
  others = new Map([
    ["another owner", await person()],
    ["a maintainer", await person("maintainer")],
    ["an admin", await person("admin")],
  ]);
}, 60_000);

describe("every route", () => {
  it("is walked here", () => {
    const standing = Object.entries(routeModules).flatMap(([path, exported]) =>
      routeMethods.filter((method) => exported[method] !== undefined).map((method) => `${method} ${path}`),
    );
    expect(Object.keys(walks).sort()).toEqual(standing.sort());
  });

  it("is closed to nobody, unless it says otherwise, and then shows nothing private", async () => {
    const before = await snapshot();
    for (const [name, walk] of Object.entries(walks)) {
      const answer = await ask(name, walk);
      const open = declarationOf(handlerOf(name))?.role === "anyone";
      expect([name, open], name).toEqual([name, walk.nobody !== undefined]);
      expect([name, answer.status]).toEqual([name, walk.nobody ?? 401]);
      expect(await answer.text(), name).not.toContain(its.profile.id);
    }
    expect(await snapshot()).toBe(before);
  });

  it("treats an expired session as nobody", async () => {
    const late = await person();
    await db.execute(sql`update session set expires = now() - interval '1 second' where user_id = ${late.id}`);
    for (const [name, walk] of Object.entries(walks)) {
      const answer = await ask(name, walk, late.cookie);
      expect([name, answer.status]).toEqual([name, walk.nobody ?? 401]);
    }
  });

  it.each(["another owner", "a maintainer", "an admin"])(
    "neither shows nor gives %s what belongs to somebody else",
    async (who) => {
      const cookie = others.get(who)?.cookie;
      const before = await snapshot();
      for (const [name, walk] of Object.entries(walks)) {
        const answer = await ask(name, walk, cookie);
        expect([name, answer.status]).toEqual([name, walk.others]);
        const text = await answer.text();
        for (const { id: theirs } of [its.screen, its.device, its.backup, its.profile, its.plan, its.run]) {
          expect(text.includes(theirs), `${name} shows ${theirs}`).toBe(false);
        }
      }
      expect(await snapshot()).toBe(before);
    },
  );

  it("does for the owner what it says", async () => {
    for (const [name, walk] of Object.entries(walks)) {
      const answer = await ask(name, walk, its.owner.cookie);
      expect([name, answer.status, answer.status >= 400 ? await answer.text() : ""]).toEqual([
        name,
        walk.owner,
        expect.any(String),
      ]);
    }
  });

  it("left a line of the audit trail for every act of the owner", async () => {
    const { rows } = await db.execute<{ action: string }>(
      sql`select distinct action from audit where actor_id = ${its.owner.id}`,
    );
    expect(rows.map(({ action }) => action)).toEqual(
      expect.arrayContaining([
        "account.rename",
        "session.revoke",
        "session.revoke-others",
        "screen.create",
        "screen.change",
        "screen.delete",
        "device.create",
        "device.change",
        "device.delete",
        "backup.create",
        "backup.rename",
        "backup.pin",
        "backup.unpin",
        "backup.delete",
        "backup.undelete",
        "profile.create",
        "profile.revise",
        "profile.visibility",
        "profile.delete",
        "plan.create",
        "run.create",
        "run.called-off",
        "run.close",
      ]),
    );
    await expect(
      db.execute(sql`update audit set action = 'nothing' where actor_id = ${its.owner.id}`),
    ).rejects.toThrow();
  });
});
