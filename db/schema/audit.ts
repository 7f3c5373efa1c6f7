import { bigserial, index, jsonb, pgTable, text, timestamp, uuid } from "drizzle-orm/pg-core";
import { user } from "@/db/schema/user";

/** Who did what, written in the transaction that did it. The migration refuses to change a row. */
export const audit = pgTable(
  "audit",
  {
    id: bigserial("id", { mode: "number" }).primaryKey(),
    at: timestamp("at", { withTimezone: true }).notNull().defaultNow(),
    /** Null: nobody was signed in, or the account is gone. */
    actorId: uuid("actor_id").references(() => user.id, { onDelete: "set null" }),
    /** noun.act, as `backup.delete`. */
    action: text("action").notNull(),
    subject: text("subject").notNull(),
    /** Names and numbers only: no values, no secrets. */
    detail: jsonb("detail").$type<Readonly<Record<string, string | number | boolean | null>>>().notNull(),
  },
  (table) => [
    index("audit_at_idx").on(table.at.desc().nullsFirst(), table.id.desc().nullsFirst()),
    index("audit_actor_idx").on(table.actorId, table.id),
    index("audit_subject_idx").on(table.subject, table.id),
  ],
);
