import { index, integer, pgTable, primaryKey, text, timestamp, uniqueIndex, uuid } from "drizzle-orm/pg-core";
import { user } from "@/db/schema/user";

/** A signed-in browser. Deleting the row signs it out. */
export const session = pgTable(
  "session",
  {
    /** SHA-256 of the cookie's value, in hex: a copy of this table signs nobody in. */
    sessionToken: text("session_token").primaryKey(),
    /** What the list of sessions names a session by. */
    id: uuid("id").notNull().defaultRandom(),
    userId: uuid("user_id")
      .notNull()
      .references(() => user.id, { onDelete: "cascade" }),
    expires: timestamp("expires", { withTimezone: true, mode: "date" }).notNull(),
    createdAt: timestamp("created_at", { withTimezone: true }).notNull().defaultNow(),
    lastSeenAt: timestamp("last_seen_at", { withTimezone: true }).notNull().defaultNow(),
    userAgent: text("user_agent"),
  },
  (table) => [
    uniqueIndex("session_id_idx").on(table.id),
    index("session_user_idx").on(table.userId, table.lastSeenAt),
    index("session_expires_idx").on(table.expires),
  ],
);

/** Sign-in providers that a user is linked to, as the authentication package's adapter wants them. */
export const account = pgTable(
  "account",
  {
    userId: uuid("user_id")
      .notNull()
      .references(() => user.id, { onDelete: "cascade" }),
    type: text("type").$type<"email" | "oauth" | "oidc" | "webauthn">().notNull(),
    provider: text("provider").notNull(),
    providerAccountId: text("provider_account_id").notNull(),
    refresh_token: text("refresh_token"),
    access_token: text("access_token"),
    expires_at: integer("expires_at"),
    token_type: text("token_type"),
    scope: text("scope"),
    id_token: text("id_token"),
    session_state: text("session_state"),
  },
  (table) => [
    primaryKey({ columns: [table.provider, table.providerAccountId] }),
    index("account_user_idx").on(table.userId),
  ],
);

/** One-time tokens that are sent to an address, hashed by the adapter's package. */
export const verification = pgTable(
  "verification",
  {
    identifier: text("identifier").notNull(),
    token: text("token").notNull(),
    expires: timestamp("expires", { withTimezone: true, mode: "date" }).notNull(),
  },
  (table) => [primaryKey({ columns: [table.identifier, table.token] })],
);
