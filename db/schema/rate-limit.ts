import { index, pgTable, text, timestamp } from "drizzle-orm/pg-core";

/** One row for each caller that is being counted; see `lib/server/limits.ts`. */
export const rateLimit = pgTable(
  "rate_limit",
  {
    /** What is counted: `address:…` or `user:…`, with the route where it has its own count. */
    key: text("key").primaryKey(),
    /** When the caller's allowance is whole again. */
    refilledAt: timestamp("refilled_at", { withTimezone: true }).notNull(),
  },
  (table) => [index("rate_limit_refilled_at_idx").on(table.refilledAt)],
);
