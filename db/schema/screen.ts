import { sql } from "drizzle-orm";
import { check, index, integer, jsonb, pgTable, text, timestamp, unique, uuid } from "drizzle-orm/pg-core";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { user } from "@/db/schema/user";

/** An owner's display and its envelope. */
export const screen = pgTable(
  "screen",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    ownerId: uuid("owner_id")
      .notNull()
      .references(() => user.id, { onDelete: "cascade" }),
    name: text("name").notNull(),
    envelope: jsonb("envelope").$type<ScreenEnvelope>().notNull(),
    /** The preset that it started from. */
    presetId: text("preset_id"),
    notes: text("notes").notNull().default(""),
    /** Counts changes; the ETag. */
    version: integer("version").notNull().default(1),
    createdAt: timestamp("created_at", { withTimezone: true }).notNull().defaultNow(),
    updatedAt: timestamp("updated_at", { withTimezone: true }).notNull().defaultNow(),
    deletedAt: timestamp("deleted_at", { withTimezone: true }),
  },
  (table) => [
    // A device can only point at a screen of the same owner.
    unique("screen_owner_key").on(table.ownerId, table.id),
    index("screen_owner_idx")
      .on(table.ownerId, table.name, table.id)
      .where(sql`deleted_at is null`),
    check("screen_name_length", sql`length(${table.name}) between 1 and 80`),
  ],
);
