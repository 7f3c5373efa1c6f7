import { sql } from "drizzle-orm";
import {
  check,
  foreignKey,
  index,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  text,
  timestamp,
  unique,
  uuid,
} from "drizzle-orm/pg-core";
import type { ProfileDocument } from "@/lib/profile/document";
import type { NativeKey, NativeValues } from "@/lib/serial/native";
import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";
import { device } from "@/db/schema/device";
import { user } from "@/db/schema/user";

/** What a device said, stored once for one owner however often it said the same. */
export const backupContent = pgTable(
  "backup_content",
  {
    ownerId: uuid("owner_id")
      .notNull()
      .references(() => user.id, { onDelete: "cascade" }),
    /** SHA-256 over the canonical JSON (RFC 8785) of driver, values and unreadable keys, in hex. */
    hash: text("hash").notNull(),
    driverSlug: text("driver_slug").notNull(),
    driverVersion: text("driver_version").notNull(),
    values: jsonb("values").$type<NativeValues>().notNull(),
    unreadable: jsonb("unreadable").$type<readonly NativeKey[]>().notNull(),
    document: jsonb("document").$type<ProfileDocument>().notNull(),
    createdAt: timestamp("created_at", { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    primaryKey({ columns: [table.ownerId, table.hash] }),
    check("backup_content_hash_form", sql`${table.hash} ~ '^[0-9a-f]{64}$'`),
  ],
);

export const backupCauses = ["by-hand", "before-run", "after-run"] as const;

/** One whole read of a device at one time. */
export const backup = pgTable(
  "backup",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    ownerId: uuid("owner_id").notNull(),
    deviceId: uuid("device_id").notNull(),
    contentHash: text("content_hash").notNull(),
    name: text("name").notNull(),
    cause: text("cause", { enum: backupCauses }).notNull(),
    firmware: text("firmware").notNull(),
    activeSlot: integer("active_slot").notNull(),
    /** What stood at the active slot's input. Null: nothing did. */
    arriving: jsonb("arriving").$type<SourceFormat>(),
    /** What the device put out. Null: nothing. */
    rasterOut: jsonb("raster_out").$type<RasterTiming>(),
    takenAt: timestamp("taken_at", { withTimezone: true }).notNull(),
    /** Counts changes of name; the ETag. */
    version: integer("version").notNull().default(1),
    createdAt: timestamp("created_at", { withTimezone: true }).notNull().defaultNow(),
    deletedAt: timestamp("deleted_at", { withTimezone: true }),
  },
  (table) => [
    unique("backup_device_key").on(table.ownerId, table.deviceId, table.id),
    foreignKey({
      name: "backup_device_fk",
      columns: [table.ownerId, table.deviceId],
      foreignColumns: [device.ownerId, device.id],
    }).onDelete("cascade"),
    foreignKey({
      name: "backup_content_fk",
      columns: [table.ownerId, table.contentHash],
      foreignColumns: [backupContent.ownerId, backupContent.hash],
    }),
    index("backup_device_taken_idx")
      .on(table.deviceId, table.takenAt.desc().nullsFirst(), table.id.desc().nullsFirst())
      .where(sql`deleted_at is null`),
    index("backup_content_idx").on(table.ownerId, table.contentHash),
    check("backup_name_length", sql`length(${table.name}) between 1 and 120`),
    check("backup_cause_known", sql`${table.cause} in ('by-hand', 'before-run', 'after-run')`),
  ],
);
