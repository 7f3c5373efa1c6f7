import { and, eq, ne } from "drizzle-orm";
import type { Db } from "@/db/client";
import { writeAudit } from "@/db/queries/audit";
import { session } from "@/db/schema/session";
import { credential, user } from "@/db/schema/user";
import type { AccountView } from "@/lib/contracts/account";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";

const accountColumns = { id: user.id, name: user.name, email: user.email, role: user.role, createdAt: user.createdAt };

type AccountRow = { id: string; name: string; email: string; role: AccountView["role"]; createdAt: Date };

function viewOf(row: AccountRow): AccountView {
  return { ...row, createdAt: row.createdAt.toISOString() };
}

export type NewAccount = { readonly name: string; readonly email: string; readonly passwordHash: string };

/** Makes an account with the role of an owner. Does nothing where the address has one already. */
export async function createAccount(db: Db, { name, email, passwordHash }: NewAccount): Promise<void> {
  await db.transaction(async (tx) => {
    const [made] = await tx.insert(user).values({ name, email }).onConflictDoNothing().returning({ id: user.id });
    if (made === undefined) return;
    await tx.insert(credential).values({ userId: made.id, passwordHash });
    await writeAudit(tx, { actorId: made.id, action: "account.create", subject: made.id });
  });
}

export type Credential = {
  readonly userId: string;
  readonly name: string;
  readonly email: string;
  readonly passwordHash: string;
};

/** The password hash behind an address (lower case), or null. */
export async function findCredential(db: Db, email: string): Promise<Credential | null> {
  const [found] = await db
    .select({ userId: user.id, name: user.name, email: user.email, passwordHash: credential.passwordHash })
    .from(user)
    .innerJoin(credential, eq(credential.userId, user.id))
    .where(eq(user.email, email));
  return found ?? null;
}

/** The account behind an address (lower case). Throws when there is none: the caller has just signed it in. */
export async function findAccountByEmail(db: Db, email: string): Promise<AccountView> {
  const [found] = await db.select(accountColumns).from(user).where(eq(user.email, email));
  if (found === undefined) throw new Error("no account behind a signed-in address");
  return viewOf(found);
}

/** A person's password hash; null where they sign in without one. */
export async function findPasswordHash(db: Db, userId: string): Promise<string | null> {
  const [found] = await db
    .select({ passwordHash: credential.passwordHash })
    .from(credential)
    .where(eq(credential.userId, userId));
  return found?.passwordHash ?? null;
}

/** The account of a signed-in person. Error: "absent" when it is gone. */
export async function getAccount(db: Db, userId: string): Promise<Result<AccountView, "absent">> {
  const [found] = await db.select(accountColumns).from(user).where(eq(user.id, userId));
  return found === undefined ? fail("absent") : ok(viewOf(found));
}

/** Changes the name. */
export async function renameAccount(db: Db, userId: string, name: string): Promise<Result<AccountView, "absent">> {
  return db.transaction(async (tx) => {
    const [changed] = await tx.update(user).set({ name }).where(eq(user.id, userId)).returning(accountColumns);
    if (changed === undefined) return fail("absent");
    await writeAudit(tx, { actorId: userId, action: "account.rename", subject: userId });
    return ok(viewOf(changed));
  });
}

/** Takes a new password hash and signs every session but `sessionId` out. Answers how many. */
export async function changePassword(
  db: Db,
  change: { readonly userId: string; readonly sessionId: string; readonly passwordHash: string },
): Promise<number> {
  return db.transaction(async (tx) => {
    await tx
      .update(credential)
      .set({ passwordHash: change.passwordHash, changedAt: new Date() })
      .where(eq(credential.userId, change.userId));
    const ended = await tx
      .delete(session)
      .where(and(eq(session.userId, change.userId), ne(session.id, change.sessionId)))
      .returning({ id: session.id });
    await writeAudit(tx, { actorId: change.userId, action: "account.password", subject: change.userId });
    return ended.length;
  });
}
