import { drizzle } from "drizzle-orm/node-postgres";
import { beforeAll, expect, it } from "vitest";
import { pool } from "@/db/client";
import type { Db } from "@/db/client";
import { listBackups } from "@/db/queries/backups";
import { listDevices } from "@/db/queries/devices";
import { listQuestions } from "@/db/queries/driver-questions";
import { listReports } from "@/db/queries/driver-reports";
import { listDrivers, listVersions, readDefinition } from "@/db/queries/drivers";
import { listProfiles } from "@/db/queries/profiles";
import { listRecordings } from "@/db/queries/recordings";
import { listRevisions } from "@/db/queries/revisions";
import { listSteps } from "@/db/queries/run-steps";
import { listRuns } from "@/db/queries/runs";
import { listScreens } from "@/db/queries/screens";
import { findSessionUser, listSessions } from "@/db/queries/sessions";

/** A plan's node, as far as it is looked at. Source: PostgreSQL, EXPLAIN (FORMAT JSON). */
type Node = { "Node Type": string; "Relation Name"?: string; "Index Name"?: string; Plans?: Node[] };
type Query = { readonly text: string; readonly values: unknown[] };

const heard: Query[] = [];
/** The product's own queries, on a connection that notes them. */
const db: Db = drizzle(pool, { logger: { logQuery: (text, values) => heard.push({ text, values }) } });

const [owner, device, profile, run] = ["1", "2", "3", "4"].map(
  (digit) => `${digit.repeat(8)}-0000-4000-8000-000000000001`,
);

/** Many people with many things each, so that a plan without an index would cost much more. */
beforeAll(async () => {
  const hash = "repeat('0', 64)";
  const statements = [
    `insert into "user" (id, name, email) select case when n = 1 then '${owner}'::uuid else gen_random_uuid() end, 'P', 'p' || n || '@example.org' from generate_series(1, 60) n`,
    `insert into session (session_token, user_id, expires) select u.id::text || n, u.id, now() + interval '1 day' from "user" u, generate_series(1, 40) n`,
    `insert into screen (owner_id, name, envelope) select u.id, 'S' || n, '{}' from "user" u, generate_series(1, 60) n`,
    `insert into device (id, owner_id, name, driver_slug, driver_version, maker, model, serial_number, firmware, simulated)
      select case when u.id = '${owner}' and n = 1 then '${device}'::uuid else gen_random_uuid() end, u.id, 'D' || n, 'd', '1', 'M', 'M', n::text, '1', true
      from "user" u, generate_series(1, 60) n`,
    `insert into backup_content (owner_id, hash, driver_slug, driver_version, "values", unreadable, document) select id, ${hash}, 'd', '1', '{}', '[]', '{}' from "user"`,
    `insert into backup (owner_id, device_id, content_hash, name, cause, firmware, active_slot, taken_at)
      select owner_id, id, ${hash}, 'B', 'by-hand', '1', 1, now() - n * interval '1 hour' from device, generate_series(1, 12) n`,
    `insert into profile (id, owner_id, visibility, title, current_revision, outline, updated_at)
      select case when u.id = '${owner}' and n = 1 then '${profile}'::uuid else gen_random_uuid() end, u.id,
        case n % 2 when 0 then 'private' else 'shared' end, 'Title number ' || n, 1, '{"modes":[],"modeCount":0,"slotCount":0}', now() - n * interval '1 minute'
      from "user" u, generate_series(1, 150) n`,
    `insert into revision (profile_id, number, document, document_hash) select id, n, '{}', ${hash} from profile, generate_series(1, 2) n`,
    `insert into plan (owner_id, device_id, backup_id, target_kind, target_document, left_out, accepted_unknown, acknowledged, active_slot, driver_slug, driver_version, hash, checked)
      select owner_id, device_id, id, 'document', '{}', '[]', true, '[]', 1, 'd', '1', ${hash}, '{}' from backup`,
    `insert into run (id, owner_id, device_id, plan_id, state, came_from, countdown_seconds, holder, ended_at, created_at)
      select case when row_number() over (order by p.owner_id = '${owner}' desc) = 1 then '${run}'::uuid else gen_random_uuid() end,
        p.owner_id, p.device_id, p.id, 'kept', 'keeping', 30, 'tab', now(), now() - random() * interval '30 days' from plan p`,
    `insert into run_step (run_id, number, at_ms, kind, entry) select id, n, 0, 'word', '{}' from run, generate_series(0, 2) n where run.owner_id = '${owner}'`,
    `insert into driver (slug, maker, model) select 's-' || n, 'M' || n, 'M' from generate_series(1, 400) n`,
    `insert into driver_version (id, slug, version, version_order, definition, hash)
      select case when d.slug = 's-1' and n = 1 then '${run}'::uuid else gen_random_uuid() end, d.slug, '1.0.' || n, array[1, 0, n], '{}', ${hash}
      from driver d, generate_series(1, 8) n where d.slug like 's-%'`,
    `insert into conformance_report (version_id, driver_hash, green, report) select id, ${hash}, false, '{}' from driver_version where slug like 's-%'`,
    `insert into recording (owner_id, name, driver_slug, driver_version, struck_out, exchanges, lines, content)
      select u.id, 'R', 's-1', '1.0.1', true, 1, 1, 'x' from "user" u, generate_series(1, 40) n`,
    `insert into driver_question (driver_slug, asker_id, text) select d.slug, '${owner}', 'T' from driver d, generate_series(1, 8) n`,
    "vacuum analyze",
  ];
  for (const statement of statements) await pool.query(statement);
}, 300_000);

function nodesOf(node: Node): Node[] {
  return [node, ...(node.Plans ?? []).flatMap(nodesOf)];
}

/** The plan nodes of what `act` asked of `table` last. */
async function planOf(table: string, act: () => Promise<unknown>): Promise<Node[]> {
  heard.length = 0;
  await act();
  const query = heard.findLast(({ text }) => text.startsWith("select") && text.includes(`from "${table}"`));
  if (query === undefined) throw new Error(`nothing was asked of ${table}`);
  const { rows } = await pool.query<{ "QUERY PLAN": [{ Plan: Node }] }>(
    `explain (format json) ${query.text}`,
    query.values,
  );
  const plan = rows[0]?.["QUERY PLAN"][0].Plan;
  return plan === undefined ? [] : nodesOf(plan);
}

const page = { limit: 25 };
const library = { ...page, mine: "false", fitting: "false" } as const;
const me = { id: owner ?? "", name: "P", role: "owner", sessionId: device ?? "" } as const;

const maintainer = { id: device ?? "", role: "maintainer" } as const;

const lists: readonly [name: string, table: string, index: string, act: () => Promise<unknown>][] = [
  ["screens by name", "screen", "screen_owner_idx", () => listScreens(db, me.id, page)],
  ["devices by name", "device", "device_owner_idx", () => listDevices(db, me.id, page)],
  [
    "a device by its identity",
    "device",
    "device_identity_idx",
    () => listDevices(db, me.id, { ...page, driverSlug: "d", serialNumber: "7" }),
  ],
  [
    "backups of a device",
    "backup",
    "backup_device_taken_idx",
    () => listBackups(db, { ownerId: me.id, deviceId: device ?? "" }, page),
  ],
  ["the library", "profile", "profile_shared_idx", () => listProfiles(db, null, library)],
  ["one's own profiles", "profile", "profile_owner_idx", () => listProfiles(db, me.id, { ...library, mine: "true" })],
  ["the library by words", "profile", "profile_search_idx", () => listProfiles(db, null, { ...library, q: "absent" })],
  [
    "revisions of a profile",
    "revision",
    "revision_number_key",
    () => listRevisions(db, { askerId: null, id: profile ?? "" }, page),
  ],
  ["runs of an owner", "run", "run_owner_idx", () => listRuns(db, me.id, { ...page, open: "false" })],
  [
    "runs of a device",
    "run",
    "run_device_idx",
    () => listRuns(db, me.id, { ...page, open: "false", deviceId: device }),
  ],
  [
    "the open run of a device",
    "run",
    "run_open_idx",
    () => listRuns(db, me.id, { ...page, open: "true", deviceId: device }),
  ],
  [
    "steps of a run",
    "run_step",
    "run_step_run_id_number_pk",
    () => listSteps(db, { ownerId: me.id, id: run ?? "" }, { after: -1, limit: 100 }),
  ],
  ["drivers by name", "driver", "driver_name_idx", () => listDrivers(db, maintainer, page)],
  [
    "versions of a driver",
    "driver_version",
    "driver_version_order_idx",
    () => listVersions(db, maintainer, "s-1", page),
  ],
  [
    "a version by its name",
    "driver_version",
    "driver_version_key",
    () => readDefinition(db, maintainer, { slug: "s-1", version: "1.0.1" }),
  ],
  [
    "reports of a version",
    "conformance_report",
    "conformance_report_version_idx",
    () => listReports(db, maintainer, { ...page, slug: "s-1", version: "1.0.1" }),
  ],
  [
    "recordings of a person",
    "recording",
    "recording_owner_idx",
    () => listRecordings(db, me, { ...page, mine: "true" }),
  ],
  [
    "questions about a driver",
    "driver_question",
    "driver_question_driver_idx",
    () => listQuestions(db, maintainer, "s-1", page),
  ],
  ["sessions of a person", "session", "session_user_idx", () => listSessions(db, me)],
  ["a session by its token", "session", "session_pkey", () => findSessionUser(db, "0")],
];

it.each(lists)("lists %s by an index, whatever else there is", async (_name, table, index, act) => {
  const nodes = await planOf(table, act);
  expect(nodes.map((node) => node["Index Name"])).toContain(index);
  const whole = nodes.filter((node) => node["Node Type"] === "Seq Scan").map((node) => node["Relation Name"]);
  expect(whole).not.toContain(table);
});

it("keeps a deleted row out of the lists' indexes", async () => {
  const { rows } = await pool.query<{ indexdef: string }>(
    "select indexdef from pg_indexes where indexname in ('screen_owner_idx', 'device_owner_idx', 'backup_device_taken_idx', 'profile_shared_idx', 'profile_owner_idx')",
  );
  expect(rows).toHaveLength(5);
  for (const { indexdef } of rows) expect(indexdef).toContain("deleted_at IS NULL");
});
