import { jsonb, index, integer, pgTable, primaryKey, text, timestamp } from "drizzle-orm/pg-core";

/** A write that was asked for under an `Idempotency-Key`, and what was answered. */
export const idempotencyKey = pgTable(
  "idempotency_key",
  {
    /** The caller: a user's id, or an address where nobody needs an account. */
    caller: text("caller").notNull(),
    key: text("key").notNull(),
    /** SHA-256 of method, path, query and body, in hex. */
    requestHash: text("request_hash").notNull(),
    /** Null while the first request is still at work. */
    status: integer("status"),
    headers: jsonb("headers").$type<Record<string, string>>(),
    body: text("body"),
    createdAt: timestamp("created_at", { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    primaryKey({ columns: [table.caller, table.key] }),
    index("idempotency_key_created_at_idx").on(table.createdAt),
  ],
);
