import { sql } from "drizzle-orm";
import {
  type AnyPgColumn,
  check,
  customType,
  doublePrecision,
  index,
  integer,
  jsonb,
  pgTable,
  text,
  timestamp,
  unique,
  uuid,
} from "drizzle-orm/pg-core";
import type { ProfileOutline } from "@/lib/contracts/profile";
import type { ProfileDocument } from "@/lib/profile/document";
import { user } from "@/db/schema/user";

const tsvector = customType<{ data: string }>({ dataType: () => "tsvector" });

export const visibilities = ["private", "shared"] as const;

/** A profile: what its revisions have in common, and what the library searches by. */
export const profile = pgTable(
  "profile",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    ownerId: uuid("owner_id")
      .notNull()
      .references(() => user.id, { onDelete: "cascade" }),
    visibility: text("visibility", { enum: visibilities }).notNull().default("private"),
    /** From the current revision, for lists and search. */
    title: text("title").notNull(),
    summary: text("summary").notNull().default(""),
    currentRevision: integer("current_revision").notNull(),
    /** Its first modes and counts, for lists: documents can be a thousand times larger. */
    outline: jsonb("outline").$type<ProfileOutline>().notNull(),
    /** Slowest and fastest line rate of its modes. Null: it states no timing. */
    lineRateMinHz: doublePrecision("line_rate_min_hz"),
    lineRateMaxHz: doublePrecision("line_rate_max_hz"),
    /** Driver that it was taken from, where it says so. */
    driverSlug: text("driver_slug"),
    search: tsvector("search")
      .notNull()
      .generatedAlwaysAs(sql`to_tsvector('simple', title || ' ' || summary)`),
    createdAt: timestamp("created_at", { withTimezone: true }).notNull().defaultNow(),
    updatedAt: timestamp("updated_at", { withTimezone: true }).notNull().defaultNow(),
    deletedAt: timestamp("deleted_at", { withTimezone: true }),
  },
  (table) => [
    index("profile_shared_idx")
      .on(table.updatedAt.desc().nullsFirst(), table.id.desc().nullsFirst())
      .where(sql`visibility = 'shared' and deleted_at is null`),
    index("profile_owner_idx")
      .on(table.ownerId, table.updatedAt.desc().nullsFirst(), table.id.desc().nullsFirst())
      .where(sql`deleted_at is null`),
    index("profile_search_idx").using("gin", table.search),
    check("profile_visibility_known", sql`${table.visibility} in ('private', 'shared')`),
    check("profile_title_length", sql`length(${table.title}) between 1 and 120`),
    check("profile_line_rates_ordered", sql`${table.lineRateMinHz} <= ${table.lineRateMaxHz}`),
  ],
);

/** One immutable version of a profile; the migration refuses to change one. */
export const revision = pgTable(
  "revision",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    profileId: uuid("profile_id")
      .notNull()
      .references(() => profile.id, { onDelete: "cascade" }),
    /** Counts from 1. */
    number: integer("number").notNull(),
    authorId: uuid("author_id").references(() => user.id, { onDelete: "set null" }),
    parentId: uuid("parent_id").references((): AnyPgColumn => revision.id, { onDelete: "set null" }),
    document: jsonb("document").$type<ProfileDocument>().notNull(),
    /** SHA-256 over the canonical JSON without provenance, in hex. */
    documentHash: text("document_hash").notNull(),
    note: text("note").notNull().default(""),
    createdAt: timestamp("created_at", { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    unique("revision_number_key").on(table.profileId, table.number),
    check("revision_number_from_one", sql`${table.number} >= 1`),
    check("revision_hash_form", sql`${table.documentHash} ~ '^[0-9a-f]{64}$'`),
  ],
);
