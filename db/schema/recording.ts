import { sql } from "drizzle-orm";
import { boolean, check, foreignKey, index, integer, pgTable, text, timestamp, uuid } from "drizzle-orm/pg-core";
import { device } from "@/db/schema/device";
import { driver } from "@/db/schema/driver";
import { user } from "@/db/schema/user";

/** A serial exchange as an owner captured it. */
export const recording = pgTable(
  "recording",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    ownerId: uuid("owner_id")
      .notNull()
      .references(() => user.id, { onDelete: "cascade" }),
    deviceId: uuid("device_id"),
    name: text("name").notNull(),
    driverSlug: text("driver_slug").notNull(),
    driverVersion: text("driver_version").notNull(),
    /** Null: the file's own word for it is no time. */
    startedAt: timestamp("started_at", { withTimezone: true }),
    struckOut: boolean("struck_out").notNull(),
    exchanges: integer("exchanges").notNull(),
    lines: integer("lines").notNull(),
    /** JSON Lines, as the program itself writes them. */
    content: text("content").notNull(),
    createdAt: timestamp("created_at", { withTimezone: true }).notNull().defaultNow(),
    deletedAt: timestamp("deleted_at", { withTimezone: true }),
  },
  (table) => [
    foreignKey({
      name: "recording_device_fk",
      columns: [table.ownerId, table.deviceId],
      foreignColumns: [device.ownerId, device.id],
    }),
    index("recording_owner_idx")
      .on(table.ownerId, table.createdAt.desc().nullsFirst(), table.id.desc().nullsFirst())
      .where(sql`deleted_at is null`),
    index("recording_created_idx")
      .on(table.createdAt.desc().nullsFirst(), table.id.desc().nullsFirst())
      .where(sql`deleted_at is null`),
    check("recording_name_length", sql`length(${table.name}) between 1 and 120`),
    check("recording_content_length", sql`octet_length(${table.content}) <= 16777216`),
  ],
);

/** A question of an owner to the maintainers of a driver. What is attached to it they may see. */
export const driverQuestion = pgTable(
  "driver_question",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    driverSlug: text("driver_slug")
      .notNull()
      .references(() => driver.slug, { onDelete: "cascade" }),
    askerId: uuid("asker_id")
      .notNull()
      .references(() => user.id, { onDelete: "cascade" }),
    text: text("text").notNull(),
    recordingId: uuid("recording_id").references(() => recording.id, { onDelete: "set null" }),
    answer: text("answer"),
    answeredById: uuid("answered_by_id").references(() => user.id, { onDelete: "set null" }),
    answeredAt: timestamp("answered_at", { withTimezone: true }),
    createdAt: timestamp("created_at", { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    index("driver_question_driver_idx").on(
      table.driverSlug,
      table.createdAt.desc().nullsFirst(),
      table.id.desc().nullsFirst(),
    ),
    index("driver_question_asker_idx").on(
      table.askerId,
      table.createdAt.desc().nullsFirst(),
      table.id.desc().nullsFirst(),
    ),
    index("driver_question_recording_idx").on(table.recordingId),
    check("driver_question_text_length", sql`length(${table.text}) between 1 and 4000`),
    check("driver_question_answer_whole", sql`(${table.answer} is null) = (${table.answeredAt} is null)`),
  ],
);
