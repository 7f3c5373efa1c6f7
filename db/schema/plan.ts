import { sql } from "drizzle-orm";
import {
  boolean,
  check,
  foreignKey,
  index,
  integer,
  jsonb,
  pgTable,
  text,
  timestamp,
  unique,
  uuid,
} from "drizzle-orm/pg-core";
import type { ProfileDocument } from "@/lib/profile/document";
import type { BackupContent } from "@/lib/serial/backup/types";
import type { CheckedPlan } from "@/lib/serial/plan/types";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { backup } from "@/db/schema/backup";
import { revision } from "@/db/schema/profile";

export const targetKinds = ["revision", "restore", "document", "edits"] as const;

/** What a run carries out, for the page and the journal: the whole input is in the other columns. */
export type StoredPlan = Pick<
  CheckedPlan,
  "way" | "steps" | "changes" | "changedSlots" | "byHand" | "bytes" | "seconds" | "rasterBefore" | "rasterAfter"
>;

/** A reviewed plan, never changed. Everything that it was made from is in the row or immutable. */
export const plan = pgTable(
  "plan",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    ownerId: uuid("owner_id").notNull(),
    deviceId: uuid("device_id").notNull(),
    /** The backup it rests on: cannot be deleted. */
    backupId: uuid("backup_id").notNull(),
    targetKind: text("target_kind", { enum: targetKinds }).notNull(),
    targetRevisionId: uuid("target_revision_id").references(() => revision.id),
    targetBackupId: uuid("target_backup_id"),
    /** As laid over the backup. */
    targetDocument: jsonb("target_document").$type<ProfileDocument>(),
    /** The backup's own content with settings edited that no document has a word for. */
    targetContent: jsonb("target_content").$type<BackupContent>(),
    leftOut: jsonb("left_out").$type<readonly number[]>().notNull(),
    /** The envelope that was checked against, as it was then. Null: the owner accepted an unknown screen. */
    screen: jsonb("screen").$type<ScreenEnvelope>(),
    screenId: uuid("screen_id"),
    acceptedUnknown: boolean("accepted_unknown").notNull(),
    acknowledged: jsonb("acknowledged").$type<readonly string[]>().notNull(),
    activeSlot: integer("active_slot").notNull(),
    driverSlug: text("driver_slug").notNull(),
    driverVersion: text("driver_version").notNull(),
    hash: text("hash").notNull(),
    checked: jsonb("checked").$type<StoredPlan>().notNull(),
    createdAt: timestamp("created_at", { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    unique("plan_device_key").on(table.ownerId, table.deviceId, table.id),
    foreignKey({
      name: "plan_backup_fk",
      columns: [table.ownerId, table.deviceId, table.backupId],
      foreignColumns: [backup.ownerId, backup.deviceId, backup.id],
    }),
    foreignKey({ name: "plan_target_backup_fk", columns: [table.targetBackupId], foreignColumns: [backup.id] }),
    index("plan_device_idx").on(table.deviceId, table.createdAt.desc().nullsFirst(), table.id.desc().nullsFirst()),
    index("plan_backup_idx").on(table.backupId),
    index("plan_target_backup_idx").on(table.targetBackupId),
    check("plan_screen_or_accepted", sql`(${table.screen} is null) = ${table.acceptedUnknown}`),
    check(
      "plan_target_whole",
      sql`num_nonnulls(${table.targetBackupId}, ${table.targetDocument}, ${table.targetContent}) = 1
        and (${table.targetKind} = 'revision') = (${table.targetRevisionId} is not null)
        and (${table.targetKind} = 'restore') = (${table.targetBackupId} is not null)
        and (${table.targetKind} = 'edits' or ${table.targetContent} is null)`,
    ),
    check("plan_target_kind_known", sql`${table.targetKind} in ('revision', 'restore', 'document', 'edits')`),
    check("plan_hash_form", sql`${table.hash} ~ '^[0-9a-f]{64}$'`),
  ],
);
