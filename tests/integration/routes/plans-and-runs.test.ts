import { sql } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import { DELETE as deleteBackup } from "@/app/api/backups/[id]/route";
import { DELETE as deleteDevice } from "@/app/api/devices/[id]/route";
import { GET as getPlan } from "@/app/api/plans/[id]/route";
import { POST as postPlan } from "@/app/api/plans/route";
import { POST as postProfile } from "@/app/api/profiles/route";
import { POST as closeRun } from "@/app/api/runs/[id]/closing/route";
import { PUT as putHolder } from "@/app/api/runs/[id]/holder/route";
import { GET as getRun } from "@/app/api/runs/[id]/route";
import { GET as listSteps, POST as postSteps } from "@/app/api/runs/[id]/steps/route";
import { GET as listRuns, POST as postRun } from "@/app/api/runs/route";
import { db } from "@/db/client";
import { demoProfiles } from "@/db/demo/seed-profiles";
import type { BackupDetail } from "@/lib/contracts/backup";
import type { Page } from "@/lib/contracts/page";
import type { PlanView } from "@/lib/contracts/plan";
import type { ProfileDetail } from "@/lib/contracts/profile";
import type { RunView } from "@/lib/contracts/run";
import type { ScreenView } from "@/lib/contracts/screen";
import type { ProfileDocument } from "@/lib/profile/document";
import { applyPatch } from "@/lib/profile/paths";
import type { TakenBackup } from "@/lib/serial/backup/types";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { planChanges } from "@/lib/serial/plan/plan-changes";
import { planEdits } from "@/lib/serial/plan/plan-edits";
import type { Planned, PlanInput } from "@/lib/serial/plan/types";
import { addBackup, addDevice, addScreen, taken } from "@/tests/integration/routes/bench";
import { bodyOf, call } from "@/tests/integration/routes/http";
import { person } from "@/tests/integration/routes/people";
import type { Person } from "@/tests/integration/routes/people";

type Ground = {
  readonly owner: Person;
  readonly screen: ScreenView;
  readonly deviceId: string;
  readonly backup: BackupDetail;
};

let factory: TakenBackup;
let shared: ProfileDetail;
let tooTall: ProfileDetail;

function documentOf(key: string): ProfileDocument {
  const document = demoProfiles.find((one) => one.key === key)?.revisions.at(-1)?.document;
  if (document === undefined) throw new Error(key);
  return document;
}

async function publish(author: Person, document: ProfileDocument): Promise<ProfileDetail> {
  return bodyOf(
    await call(postProfile, { method: "POST", cookie: author.cookie, body: { document, visibility: "shared" } }),
  );
}

beforeAll(async () => {
  factory = await taken();
  const author = await person();
  [shared, tooTall] = [await publish(author, documentOf("upright-240")), await publish(author, documentOf("too-tall"))];
}, 60_000);

async function ground(): Promise<Ground> {
  const owner = await person();
  const screen = await addScreen(owner);
  const device = await addDevice(owner, { screenId: screen.id });
  return { owner, screen, deviceId: device.id, backup: await addBackup(owner, device.id, factory) };
}

function baseOf({ screen, backup }: Ground): Omit<PlanInput, "target" | "acknowledged" | "leftOut"> {
  const { content, arriving, activeSlot, rasterOut } = backup;
  return { backup: content, driver: lanternfieldLf8, screen: screen.envelope, source: arriving, activeSlot, rasterOut };
}

/** Plans as the page does: once to see the cautions, once with all of them acknowledged. */
function reviewed(plan: (acknowledged: readonly string[]) => Planned): {
  hash: string;
  acknowledged: readonly string[];
} {
  const acknowledged = plan([]).toAcknowledge;
  return { hash: plan(acknowledged).plan?.hash ?? "0".repeat(64), acknowledged };
}

function profilePlan(on: Ground, document: ProfileDocument, leftOut: readonly number[] = []) {
  return reviewed((acknowledged) =>
    planChanges({ ...baseOf(on), leftOut, acknowledged, target: { kind: "profile", document } }),
  );
}

function sendPlan({ owner, backup, screen }: Ground, body: object): Promise<Response> {
  const defaults = { backupId: backup.id, leftOut: [], screen: { id: screen.id } };
  return call(postPlan, { method: "POST", cookie: owner.cookie, body: { ...defaults, ...body } });
}

const revisionTarget = (profile: ProfileDetail) => ({ kind: "revision", revisionId: profile.revision.id });

async function storedPlan(on: Ground): Promise<PlanView> {
  const answer = await sendPlan(on, { target: revisionTarget(shared), ...profilePlan(on, shared.revision.document) });
  if (answer.status !== 201) throw new Error(await answer.text());
  return bodyOf(answer);
}

function openRun({ owner }: Ground, { id, hash }: Pick<PlanView, "id" | "hash">, more: object = {}): Promise<Response> {
  const body = { planId: id, holder: "tab-number-one", ...more };
  return call(postRun, { method: "POST", cookie: owner.cookie, body, headers: { "if-match": `"${hash}"` } });
}

const rowsOf = async (table: "plan" | "run") =>
  (await db.execute<{ n: number }>(sql`select count(*)::int as n from ${sql.identifier(table)}`)).rows[0]?.n;

describe("plans", () => {
  it("get an id only where the server comes to the same hash, and give their whole input back", async () => {
    const on = await ground();
    const plan = await storedPlan(on);
    expect(plan.writes.length).toBeGreaterThan(0);
    const found = await call(getPlan, { cookie: on.owner.cookie, params: { id: plan.id } });
    expect(found.headers.get("etag")).toBe(`"${plan.hash}"`);
    const { input } = await bodyOf<{ input: Omit<PlanInput, "driver"> }>(found);
    const again = planChanges({ ...input, driver: lanternfieldLf8 });
    expect(again.plan?.hash).toBe(plan.hash);
  });

  it("get none with another hash, another target, a caution not read, or another screen", async () => {
    const on = await ground();
    const { hash, acknowledged } = profilePlan(on, shared.revision.document);
    const other = await addScreen(on.owner, { ...on.screen.envelope, name: "Another", minSyncUs: 4.1 });
    const before = await rowsOf("plan");
    const target = revisionTarget(shared);
    const wrong = [
      [{ target, hash: "f".repeat(64), acknowledged }, 409, "other-hash"],
      [{ target, hash, acknowledged, leftOut: [1] }, 422, "no-plan"],
      [{ target, hash, acknowledged: [] }, 422, "no-plan"],
      [{ target, hash, acknowledged, screen: { id: other.id } }, 409, "other-hash"],
      [{ target, hash, acknowledged, screen: { id: crypto.randomUUID() } }, 422, "no-screen"],
      [{ target: { kind: "revision", revisionId: crypto.randomUUID() }, hash, acknowledged }, 422, "no-revision"],
      [
        { target: { ...target, patches: [{ path: "slots[1].nothing", value: 1 }] }, hash, acknowledged },
        422,
        "bad-patch",
      ],
      [{ target: { kind: "restore", backupId: crypto.randomUUID() }, hash, acknowledged }, 422, "no-target"],
      [{ target, hash, acknowledged, backupId: crypto.randomUUID() }, 404, "absent"],
      [{ target, hash: "short", acknowledged }, 400, undefined],
    ] as const;
    for (const [body, status, code] of wrong) {
      const answer = await sendPlan(on, body);
      expect([answer.status, (await bodyOf(answer)).code]).toEqual([status, code]);
    }
    expect(await rowsOf("plan")).toBe(before);
  });

  it("get none, and no run, on a stop, whatever hash comes with it", async () => {
    const on = await ground();
    const { hash, acknowledged } = profilePlan(on, shared.revision.document);
    const [plans, runs] = [await rowsOf("plan"), await rowsOf("run")];
    const answer = await sendPlan(on, { target: revisionTarget(tooTall), hash, acknowledged });
    const body = await bodyOf<{ code: string; errors: { path: string }[] }>(answer);
    expect([answer.status, body.code]).toEqual([422, "no-plan"]);
    expect(body.errors.map(({ path }) => path)).toContain("slots[1].placement.heightPct");
    expect((await openRun(on, { id: crypto.randomUUID(), hash })).status).toBe(404);
    expect([await rowsOf("plan"), await rowsOf("run")]).toEqual([plans, runs]);
  });

  it("take the remedies that were clicked, in their order", async () => {
    const on = await ground();
    const patches = [
      { path: "slots[1].placement.heightPct", value: 97.6 },
      { path: "slots[1].placement.offsetLines", value: 0 },
    ];
    const planned = profilePlan(on, applyPatch(tooTall.revision.document, patches));
    const answer = await sendPlan(on, { target: { ...revisionTarget(tooTall), patches }, ...planned });
    expect(answer.status).toBe(201);
  });

  it("are made for settings edited by hand, also those that no document has a word for", async () => {
    const on = await ground();
    const edits = [{ path: "slots[2].colour.brightnessPct", value: 110 }];
    for (const native of [[], [{ key: "native.fanPct", value: 30 }]]) {
      const planned = reviewed((acknowledged) =>
        planEdits({ ...baseOf(on), edits, nativeEdits: native, acknowledged }),
      );
      const answer = await sendPlan(on, { target: { kind: "edits", edits, native }, ...planned });
      expect(answer.status).toBe(201);
      const plan = await bodyOf<PlanView>(answer);
      expect(plan.writes).toHaveLength(1 + native.length);
      const { input } = await bodyOf<{ input: Omit<PlanInput, "driver"> }>(
        await call(getPlan, { cookie: on.owner.cookie, params: { id: plan.id } }),
      );
      expect(planChanges({ ...input, driver: lanternfieldLf8 }).plan?.hash).toBe(plan.hash);
    }
  });

  it("bring a device back to one of its backups, and neither of the two can be deleted then", async () => {
    const on = await ground();
    const later = await addBackup(on.owner, on.deviceId, await taken({ "slots[3].colour.contrastPct": 80 }), {
      takenAt: "2026-10-02T10:00:00Z",
    });
    const now = { ...on, backup: later };
    const planned = reviewed((acknowledged) =>
      planChanges({
        ...baseOf(now),
        leftOut: [],
        acknowledged,
        target: { kind: "restore", content: on.backup.content },
      }),
    );
    const answer = await sendPlan(now, { target: { kind: "restore", backupId: on.backup.id }, ...planned });
    expect((await bodyOf<PlanView>(answer)).writes).toEqual([{ key: "slots[3].colour.contrastPct", value: 100 }]);
    for (const { id } of [on.backup, later]) {
      const refused = await call(deleteBackup, { method: "DELETE", cookie: on.owner.cookie, params: { id } });
      expect([refused.status, (await bodyOf(refused)).code]).toEqual([409, "in-use"]);
    }
  });
});

const state = (number: number, name: string) => ({ number, atMs: 1000 + number, kind: "state", state: name });
const word = (number: number, said: "keep" | "back", atMs = 1000 + number) => ({
  number,
  atMs,
  kind: "word",
  word: said,
});
const write = (number: number, outcome: string, atMs = 1000 + number) => ({
  number,
  atMs,
  kind: "request",
  direction: "forward",
  request: "write",
  outcome,
  old: [{ key: "native.fanPct", value: 40 }],
  new: [{ key: "native.fanPct", value: 30 }],
});

describe("runs", () => {
  async function running(): Promise<{
    on: Ground;
    run: RunView;
    send: (entries: object[], holder?: string) => Promise<Response>;
  }> {
    const on = await ground();
    const answer = await openRun(on, await storedPlan(on));
    expect(answer.status).toBe(201);
    const run = await bodyOf<RunView>(answer);
    const send = (entries: object[], holder = "tab-number-one") =>
      call(postSteps, { method: "POST", cookie: on.owner.cookie, params: { id: run.id }, body: { holder, entries } });
    return { on, run, send };
  }

  const view = async ({ owner }: Ground, { id }: RunView) =>
    bodyOf<RunView>(await call(getRun, { cookie: owner.cookie, params: { id } }));

  it("need the hash of the plan that they carry out", async () => {
    const on = await ground();
    const plan = await storedPlan(on);
    expect((await openRun(on, { id: plan.id, hash: "0".repeat(64) })).status).toBe(412);
    const body = { planId: plan.id, holder: "tab-number-one" };
    expect((await call(postRun, { method: "POST", cookie: on.owner.cookie, body })).status).toBe(428);
    expect((await openRun(on, plan, { countdownSeconds: 9 })).status).toBe(400);
    expect((await openRun(on, plan, { countdownSeconds: 121 })).status).toBe(400);
  });

  it("are open one a device at a time, also when two are asked for at once", async () => {
    const on = await ground();
    const plan = await storedPlan(on);
    const answers = await Promise.all([openRun(on, plan), openRun(on, plan, { holder: "tab-number-two" })]);
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 409]);
    const open = await bodyOf<Page<RunView>>(
      await call(listRuns, { cookie: on.owner.cookie, path: `/api/runs?open=true&deviceId=${on.deviceId}` }),
    );
    expect(open.items).toHaveLength(1);
    const refused = await call(deleteDevice, {
      method: "DELETE",
      cookie: on.owner.cookie,
      params: { id: on.deviceId },
    });
    expect([refused.status, (await bodyOf(refused)).code]).toEqual([409, "open-run"]);
  });

  it("keep a journal in which the later outcome of a step wins, however often and in whatever order it is sent", async () => {
    const { on, run, send } = await running();
    expect((await send([word(0, "keep"), state(1, "writing"), write(2, "leaving")])).status).toBe(200);
    expect((await send([write(2, "done", 1010)])).status).toBe(200);
    expect((await send([write(2, "leaving"), word(0, "keep"), state(1, "writing")])).status).toBe(200);
    const list = await bodyOf<{ items: { number: number; outcome?: string }[]; more: boolean }>(
      await call(listSteps, { cookie: on.owner.cookie, params: { id: run.id } }),
    );
    expect(list.items.map(({ number, outcome }) => [number, outcome])).toEqual([
      [0, undefined],
      [1, undefined],
      [2, "done"],
    ]);
    expect(await view(on, run)).toMatchObject({ state: "writing", lastWord: "keep", lastStep: 2, endedAt: null });
    const page = await call(listSteps, { cookie: on.owner.cookie, params: { id: run.id }, path: "/x?after=0&limit=1" });
    expect(await bodyOf(page)).toMatchObject({ items: [{ number: 1 }], more: true });
  });

  it("refuse a step that is another one, a state that does not follow, and a tab that does not hold them", async () => {
    const { on, run, send } = await running();
    await send([word(0, "keep"), state(1, "writing")]);
    for (const [entries, holder, code] of [
      [[write(1, "done")], undefined, "other-step"],
      [[state(2, "kept"), state(3, "trying")], undefined, "not-a-move"],
      [[state(2, "ready")], undefined, "not-a-move"],
      [[state(2, "trying")], "tab-number-two", "held"],
    ] as const) {
      const answer = await send([...entries], holder);
      expect([answer.status, (await bodyOf(answer)).code]).toEqual([409, code]);
    }
    expect(await view(on, run)).toMatchObject({ state: "writing", lastStep: 1 });
  });

  it("take one of two keeps at once and refuse the other, which changes nothing", async () => {
    const { on, run, send } = await running();
    await send([word(0, "keep"), state(1, "writing"), state(2, "trying")]);
    const answers = await Promise.all([send([word(3, "keep")]), send([word(4, "keep")])]);
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 409]);
    const refused = answers.find(({ status }) => status === 409);
    expect(refused && (await bodyOf(refused)).code).toBe("keep-taken");
    const list = await bodyOf<{ items: { kind: string }[] }>(
      await call(listSteps, { cookie: on.owner.cookie, params: { id: run.id } }),
    );
    expect(list.items.filter(({ kind }) => kind === "word")).toHaveLength(2);
  });

  it("refuse a keep from a second tab", async () => {
    const { send } = await running();
    await send([word(0, "keep"), state(1, "writing"), state(2, "trying")]);
    const answers = await Promise.all([send([word(3, "keep")]), send([word(3, "keep")], "tab-number-two")]);
    expect(answers.map(({ status }) => status)).toEqual([200, 409]);
  });

  it("end, free the device, and name the backup taken after", async () => {
    const { on, run, send } = await running();
    const close = (id: string) =>
      call(closeRun, { method: "POST", cookie: on.owner.cookie, params: { id: run.id }, body: { afterBackupId: id } });
    expect((await close(on.backup.id)).status).toBe(409);
    const all = [
      word(0, "keep"),
      state(1, "writing"),
      write(2, "done"),
      state(3, "trying"),
      word(4, "keep"),
      state(5, "keeping"),
      state(6, "kept"),
    ];
    expect((await send(all)).status).toBe(200);
    expect(await view(on, run)).toMatchObject({ state: "kept" });
    expect((await view(on, run)).endedAt).not.toBeNull();
    expect((await close(crypto.randomUUID())).status).toBe(422);
    const after = await addBackup(on.owner, on.deviceId, factory, { cause: "after-run" });
    expect(await bodyOf(await close(after.id))).toMatchObject({ afterBackupId: after.id });
    expect((await openRun(on, await storedPlan(on))).status).toBe(201);
  });

  it("can be taken over from a silent tab, or by force, and from then on by the new one alone", async () => {
    const { on, run, send } = await running();
    const hold = (holder: string, force: boolean) =>
      call(putHolder, { method: "PUT", cookie: on.owner.cookie, params: { id: run.id }, body: { holder, force } });
    expect((await hold("tab-number-two", false)).status).toBe(409);
    expect((await hold("tab-number-two", true)).status).toBe(200);
    expect((await send([word(0, "keep")])).status).toBe(409);
    await db.execute(sql`update run set holder_seen_at = now() - interval '31 seconds' where id = ${run.id}`);
    expect((await hold("tab-number-three", false)).status).toBe(200);
    expect((await send([word(0, "keep")], "tab-number-three")).status).toBe(200);
  });
});
