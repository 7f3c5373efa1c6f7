import { sql } from "drizzle-orm";
import {
  boolean,
  check,
  index,
  integer,
  jsonb,
  pgTable,
  text,
  timestamp,
  unique,
  uniqueIndex,
  uuid,
} from "drizzle-orm/pg-core";
import type { ConformanceReport } from "@/lib/serial/conformance/report";
import { driverTransitions } from "@/db/schema/driver-transitions";
import type { DriverVersionState } from "@/db/schema/driver-transitions";
import { user } from "@/db/schema/user";

/** Every allowed move, as "from>to". */
const moves = sql.raw(
  Object.entries(driverTransitions)
    .flatMap(([from, targets]) => targets.map((to) => `'${from}>${to}'`))
    .join(", "),
);

/** A device model that there is a driver for. */
export const driver = pgTable(
  "driver",
  {
    slug: text("slug").primaryKey(),
    maker: text("maker").notNull(),
    model: text("model").notNull(),
    createdAt: timestamp("created_at", { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    index("driver_name_idx").on(table.maker, table.model, table.slug),
    check("driver_slug_form", sql`${table.slug} ~ '^[a-z0-9]+(-[a-z0-9]+)*$' and length(${table.slug}) <= 64`),
  ],
);

export const driverOrigins = ["shipped", "written"] as const;

/** One version of a driver. The migration refuses to change the definition of anything but a draft. */
export const driverVersion = pgTable(
  "driver_version",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    slug: text("slug")
      .notNull()
      .references(() => driver.slug, { onDelete: "cascade" }),
    version: text("version").notNull(),
    /** The three numbers of the version, so that 1.10.0 comes after 1.9.0. */
    versionOrder: integer("version_order").array().notNull(),
    state: text("state").$type<DriverVersionState>().notNull().default("draft"),
    /** The state before this one; null at the start. */
    cameFrom: text("came_from").$type<DriverVersionState>(),
    /** What came with the program was proved by its own tests and needs no report here. */
    origin: text("origin", { enum: driverOrigins }).notNull().default("written"),
    /** As written: a draft may be unfinished, so it is parsed where it is used. */
    definition: jsonb("definition").$type<Readonly<Record<string, unknown>>>().notNull(),
    hash: text("hash").notNull(),
    note: text("note").notNull().default(""),
    authorId: uuid("author_id").references(() => user.id, { onDelete: "set null" }),
    /** The report that it was published with. The migration adds the key: it names the hash too, and that it is green. */
    reportId: uuid("report_id"),
    reportGreen: boolean("report_green"),
    /** Counts changes; the ETag. */
    revision: integer("revision").notNull().default(1),
    createdAt: timestamp("created_at", { withTimezone: true }).notNull().defaultNow(),
    updatedAt: timestamp("updated_at", { withTimezone: true }).notNull().defaultNow(),
    publishedAt: timestamp("published_at", { withTimezone: true }),
    withdrawnAt: timestamp("withdrawn_at", { withTimezone: true }),
    withdrawnReason: text("withdrawn_reason"),
  },
  (table) => [
    uniqueIndex("driver_version_key").on(table.slug, table.version),
    index("driver_version_order_idx").on(
      table.slug,
      table.versionOrder.desc().nullsFirst(),
      table.id.desc().nullsFirst(),
    ),
    index("driver_version_report_idx").on(table.reportId),
    check("driver_version_form", sql`${table.version} ~ '^\\d{1,4}\\.\\d{1,4}\\.\\d{1,4}$'`),
    check("driver_version_hash_form", sql`${table.hash} ~ '^[0-9a-f]{64}$'`),
    check("driver_version_state_known", sql`${table.state} in ('draft', 'conformance', 'published', 'withdrawn')`),
    check(
      "driver_version_transition_allowed",
      sql`(${table.cameFrom} is null and ${table.state} = case ${table.origin} when 'shipped' then 'published' else 'draft' end)
        or coalesce(${table.cameFrom}, '') || '>' || ${table.state} in (${moves})`,
    ),
    check(
      "driver_version_published_with_report",
      sql`${table.state} not in ('published', 'withdrawn') or ${table.origin} = 'shipped'
        or (${table.reportId} is not null and ${table.reportGreen} is true)`,
    ),
    check("driver_version_report_whole", sql`(${table.reportId} is null) = (${table.reportGreen} is null)`),
    check(
      "driver_version_published_at",
      sql`(${table.publishedAt} is not null) = (${table.state} in ('published', 'withdrawn'))`,
    ),
    check(
      "driver_version_withdrawn_whole",
      sql`(${table.state} = 'withdrawn') = (${table.withdrawnAt} is not null) and (${table.withdrawnAt} is null) = (${table.withdrawnReason} is null)`,
    ),
  ],
);

/** What a suite of conformance found out about one definition. The migration refuses to change one. */
export const conformanceReport = pgTable(
  "conformance_report",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    versionId: uuid("version_id")
      .notNull()
      .references(() => driverVersion.id, { onDelete: "cascade" }),
    driverHash: text("driver_hash").notNull(),
    green: boolean("green").notNull(),
    report: jsonb("report").$type<ConformanceReport>().notNull(),
    authorId: uuid("author_id").references(() => user.id, { onDelete: "set null" }),
    createdAt: timestamp("created_at", { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    unique("conformance_report_proof_key").on(table.id, table.versionId, table.driverHash, table.green),
    index("conformance_report_version_idx").on(
      table.versionId,
      table.createdAt.desc().nullsFirst(),
      table.id.desc().nullsFirst(),
    ),
    check("conformance_report_hash_form", sql`${table.driverHash} ~ '^[0-9a-f]{64}$'`),
  ],
);
