import { sql } from "drizzle-orm";
import { check, index, pgTable, text, timestamp, uniqueIndex, uuid } from "drizzle-orm/pg-core";

export const userRoles = ["owner", "maintainer", "admin"] as const;

/** A person with an account. Addresses are stored in lower case. */
export const user = pgTable(
  "user",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    name: text("name").notNull(),
    email: text("email").notNull(),
    emailVerified: timestamp("email_verified", { withTimezone: true, mode: "date" }),
    image: text("image"),
    role: text("role", { enum: userRoles }).notNull().default("owner"),
    createdAt: timestamp("created_at", { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    uniqueIndex("user_email_idx").on(table.email),
    index("user_created_at_idx").on(table.createdAt, table.id),
    check("user_email_lower_case", sql`${table.email} = lower(${table.email})`),
    check("user_role_known", sql`${table.role} in ('owner', 'maintainer', 'admin')`),
    check("user_name_length", sql`length(${table.name}) between 1 and 80`),
  ],
);

/** The password of a user who has one: an argon2id string (PHC format). */
export const credential = pgTable("credential", {
  userId: uuid("user_id")
    .primaryKey()
    .references(() => user.id, { onDelete: "cascade" }),
  passwordHash: text("password_hash").notNull(),
  changedAt: timestamp("changed_at", { withTimezone: true }).notNull().defaultNow(),
});
