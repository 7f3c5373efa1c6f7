import { sql } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import { declarationOf, routeMethods } from "@/app/api/_http/openapi";
import { routeModules } from "@/app/api/openapi.json/routes";
import { db } from "@/db/client";
import type { PlanView } from "@/lib/contracts/plan";
import type { ProfileDetail } from "@/lib/contracts/profile";
import type { QuestionView, RecordingView } from "@/lib/contracts/recording";
import type { RunView } from "@/lib/contracts/run";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { planChanges } from "@/lib/serial/plan/plan-changes";
import { addBackup, addDevice, addScreen, taken } from "@/tests/integration/routes/bench";
import { bodyOf, call } from "@/tests/integration/routes/http";
import { document, recordingFile, walks } from "@/tests/integration/routes/walks";
import type { Belongings, Walk } from "@/tests/integration/routes/walks";
import { person } from "@/tests/integration/routes/people";
import type { Person } from "@/tests/integration/routes/people";

type Handler = Parameters<typeof call>[0];

let its: Belongings;
let others: ReadonlyMap<string, Person>;
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
      (select string_agg(t::text, ' ' order by id) from recording t where owner_id = ${its.owner.id}),
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
  const uploaded = await call(handlerOf("POST /api/recordings"), {
    method: "POST",
    cookie: owner.cookie,
    path: "/x?name=Mine",
    text: recordingFile,
    headers: { "content-type": "application/x-ndjson" },
  });
  const recording = await bodyOf<RecordingView>(uploaded);
  const asked = await call(handlerOf("POST /api/drivers/{slug}/questions"), {
    method: "POST",
    cookie: owner.cookie,
    params: { slug: lanternfieldLf8.slug },
    body: { text: "Does it?" },
  });
  const question = await bodyOf<QuestionView>(asked);
  const second = await db.execute<{ id: string }>(sql`
    insert into session (session_token, user_id, expires) values ('a second browser', ${owner.id}, now() + interval '1 day') returning id`);
  return {
    owner,
    screen,
    device,
    backup,
    spare,
    profile,
    plan,
    run,
    recording,
    question,
    session: second.rows[0]?.id ?? "",
  };
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
        const wanted = who === "another owner" ? walk.others : (walk.maintainers ?? walk.others);
        expect([name, answer.status]).toEqual([name, wanted]);
        const text = await answer.text();
        for (const { id: theirs } of [
          its.screen,
          its.device,
          its.backup,
          its.profile,
          its.plan,
          its.run,
          its.recording,
        ]) {
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
        "recording.create",
        "recording.delete",
        "driver-question.ask",
        "device.driver-move",
        "device.driver-acknowledge",
      ]),
    );
    await expect(
      db.execute(sql`update audit set action = 'nothing' where actor_id = ${its.owner.id}`),
    ).rejects.toThrow();
  });
});
