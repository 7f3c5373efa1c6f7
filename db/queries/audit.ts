import type { Db } from "@/db/client";
import { audit } from "@/db/schema/audit";

export type AuditEntry = {
  /** Null: nobody was signed in. */
  readonly actorId: string | null;
  /** noun.act, as `backup.delete`. */
  readonly action: string;
  /** Id of the row that it is about. */
  readonly subject: string;
  /** Names and numbers, never values or secrets. */
  readonly detail?: Readonly<Record<string, string | number | boolean | null>>;
};

/** Writes one line of the audit trail; call it in the transaction of the act. */
export async function writeAudit(tx: Db, { actorId, action, subject, detail = {} }: AuditEntry): Promise<void> {
  await tx.insert(audit).values({ actorId, action, subject, detail });
}
