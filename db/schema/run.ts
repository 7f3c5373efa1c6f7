import { sql } from "drizzle-orm";
import {
  boolean,
  check,
  doublePrecision,
  foreignKey,
  index,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  text,
  timestamp,
  uniqueIndex,
  uuid,
} from "drizzle-orm/pg-core";
import type { JournalEntry, OwnerWord, RunState } from "@/lib/serial/run/types";
import { backup } from "@/db/schema/backup";
import { plan } from "@/db/schema/plan";
import { runTransitions } from "@/db/schema/run-transitions";

/** States in which a run no longer holds its device. */
const final = sql.raw(`('kept', 'called-off', 'put-back', 'left')`);

/** Every allowed move, as "from>to". */
const moves = sql.raw(
  Object.entries(runTransitions)
    .flatMap(([from, targets]) => targets.map((to) => `'${from}>${to}'`))
    .join(", "),
);

/** One execution of a plan. */
export const run = pgTable(
  "run",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    ownerId: uuid("owner_id").notNull(),
    deviceId: uuid("device_id").notNull(),
    planId: uuid("plan_id").notNull(),
    state: text("state").$type<RunState>().notNull().default("ready"),
    /** The state before this one; null at the start. */
    cameFrom: text("came_from").$type<RunState>(),
    countdownSeconds: integer("countdown_seconds").notNull(),
    /** The browser tab that runs it, by an id of its own, and when it was last heard. */
    holder: text("holder").notNull(),
    holderSeenAt: timestamp("holder_seen_at", { withTimezone: true }).notNull().defaultNow(),
    /** What the owner said last. */
    lastWord: text("last_word").$type<OwnerWord>(),
    /** The owner kept: set once, so that of two keeps at once one is refused. */
    keepTaken: boolean("keep_taken").notNull().default(false),
    /** The backup taken after it was kept. */
    afterBackupId: uuid("after_backup_id").references(() => backup.id),
    createdAt: timestamp("created_at", { withTimezone: true }).notNull().defaultNow(),
    updatedAt: timestamp("updated_at", { withTimezone: true }).notNull().defaultNow(),
    endedAt: timestamp("ended_at", { withTimezone: true }),
  },
  (table) => [
    foreignKey({
      name: "run_plan_fk",
      columns: [table.ownerId, table.deviceId, table.planId],
      foreignColumns: [plan.ownerId, plan.deviceId, plan.id],
    }),
    uniqueIndex("run_open_idx")
      .on(table.deviceId)
      .where(sql`state not in ${final}`),
    index("run_device_idx").on(table.deviceId, table.createdAt.desc().nullsFirst(), table.id.desc().nullsFirst()),
    index("run_owner_idx").on(table.ownerId, table.createdAt.desc().nullsFirst(), table.id.desc().nullsFirst()),
    index("run_plan_idx").on(table.planId),
    index("run_after_backup_idx").on(table.afterBackupId),
    check(
      "run_state_known",
      sql`${table.state} in ('ready', 'writing', 'trying', 'keeping', 'kept', 'called-off', 'putting-back', 'put-back', 'unconfirmed', 'mixed', 'left')`,
    ),
    check(
      "run_transition_allowed",
      sql`(${table.cameFrom} is null and ${table.state} = 'ready') or coalesce(${table.cameFrom}, '') || '>' || ${table.state} in (${moves})`,
    ),
    check("run_end_stated", sql`(${table.endedAt} is not null) = (${table.state} in ${final})`),
    check("run_countdown_bounds", sql`${table.countdownSeconds} between 10 and 120`),
    check("run_word_known", sql`${table.lastWord} in ('keep', 'back')`),
  ],
);

/** The journal of a run. One row a step: a later outcome takes the place of an earlier one. */
export const runStep = pgTable(
  "run_step",
  {
    runId: uuid("run_id")
      .notNull()
      .references(() => run.id, { onDelete: "cascade" }),
    number: integer("number").notNull(),
    /** When it happened, by the browser's clock, in ms since 1970. */
    atMs: doublePrecision("at_ms").notNull(),
    kind: text("kind").$type<JournalEntry["kind"]>().notNull(),
    /** Requests only. */
    direction: text("direction").$type<"forward" | "back">(),
    request: text("request"),
    outcome: text("outcome").$type<"leaving" | "done" | "refused" | "unknown" | "mismatch">(),
    /** The whole entry: old, new and read-back values among it. */
    entry: jsonb("entry").$type<JournalEntry>().notNull(),
    recordedAt: timestamp("recorded_at", { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    primaryKey({ columns: [table.runId, table.number] }),
    check("run_step_number", sql`${table.number} >= 0`),
    check("run_step_kind_known", sql`${table.kind} in ('request', 'state', 'word', 'boot-count', 'stated-cycle', 'align')`),
    check(
      "run_step_request_whole",
      sql`(${table.kind} = 'request') = (${table.direction} is not null and ${table.request} is not null and ${table.outcome} is not null)`,
    ),
    check("run_step_outcome_known", sql`${table.outcome} in ('leaving', 'done', 'refused', 'unknown', 'mismatch')`),
  ],
);
