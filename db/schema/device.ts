import { sql } from "drizzle-orm";
import {
  boolean,
  check,
  foreignKey,
  index,
  integer,
  pgTable,
  text,
  timestamp,
  unique,
  uniqueIndex,
  uuid,
} from "drizzle-orm/pg-core";
import { screen } from "@/db/schema/screen";
import { user } from "@/db/schema/user";

/** An owner's device. Its identity is driver and serial number, or a guess where the device has no serial number. */
export const device = pgTable(
  "device",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    ownerId: uuid("owner_id")
      .notNull()
      .references(() => user.id, { onDelete: "cascade" }),
    name: text("name").notNull(),
    driverSlug: text("driver_slug").notNull(),
    driverVersion: text("driver_version").notNull(),
    maker: text("maker").notNull(),
    model: text("model").notNull(),
    /** Null: the device has none, so which device this is was told by its owner. */
    serialNumber: text("serial_number"),
    firmware: text("firmware").notNull(),
    simulated: boolean("simulated").notNull(),
    screenId: uuid("screen_id"),
    /** The driver version whose notice the owner has put aside. */
    acknowledgedDriverVersion: text("acknowledged_driver_version"),
    /** The backup to come back to. The migration adds the key to `backup`: the two tables name each other. */
    knownGoodBackupId: uuid("known_good_backup_id"),
    /** Counts changes; the ETag. */
    version: integer("version").notNull().default(1),
    createdAt: timestamp("created_at", { withTimezone: true }).notNull().defaultNow(),
    updatedAt: timestamp("updated_at", { withTimezone: true }).notNull().defaultNow(),
    deletedAt: timestamp("deleted_at", { withTimezone: true }),
  },
  (table) => [
    unique("device_owner_key").on(table.ownerId, table.id),
    foreignKey({
      name: "device_screen_fk",
      columns: [table.ownerId, table.screenId],
      foreignColumns: [screen.ownerId, screen.id],
    }),
    index("device_owner_idx")
      .on(table.ownerId, table.name, table.id)
      .where(sql`deleted_at is null`),
    uniqueIndex("device_identity_idx")
      .on(table.ownerId, table.driverSlug, table.serialNumber)
      .where(sql`serial_number is not null and deleted_at is null`),
    check("device_name_length", sql`length(${table.name}) between 1 and 80`),
  ],
);
