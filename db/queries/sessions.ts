import { and, desc, eq, gt, lt, ne, sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { writeAudit } from "@/db/queries/audit";
import { session } from "@/db/schema/session";
import { user } from "@/db/schema/user";
import type { SessionView } from "@/lib/contracts/account";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";

/** A session ends this long after it was last seen. */
export const sessionDays = 30;
/** A session's time of last sight is written at most this often. */
const seenEveryMinutes = 5;
/** Sessions of one person that a list shows and a sign-in leaves. */
const maxSessions = 50;

export type SessionUser = {
  readonly id: string;
  readonly name: string;
  readonly role: "owner" | "maintainer" | "admin";
  readonly sessionId: string;
};

/** Who a token signs in, by its SHA-256; null when it is unknown or has expired. Moves the time of last sight. */
export async function findSessionUser(db: Db, tokenHash: string): Promise<SessionUser | null> {
  const [found] = await db
    .select({
      id: user.id,
      name: user.name,
      role: user.role,
      sessionId: session.id,
      stale: sql<boolean>`${session.lastSeenAt} < now() - make_interval(mins => ${seenEveryMinutes})`,
    })
    .from(session)
    .innerJoin(user, eq(user.id, session.userId))
    .where(and(eq(session.sessionToken, tokenHash), gt(session.expires, sql`now()`)));
  if (found === undefined) return null;
  const { stale, ...signedIn } = found;
  if (stale) {
    await db
      .update(session)
      .set({ lastSeenAt: sql`now()`, expires: sql`now() + make_interval(days => ${sessionDays})` })
      .where(eq(session.sessionToken, tokenHash));
  }
  return signedIn;
}

/**
 * Stores a new session, and removes what has expired and the person's oldest ones beyond the bound.
 * @param start `tokenHash` is the SHA-256 of the cookie's value
 */
export async function startSession(
  db: Db,
  start: { readonly tokenHash: string; readonly userId: string; readonly userAgent: string | null },
): Promise<void> {
  await db.transaction(async (tx) => {
    await tx.delete(session).where(and(eq(session.userId, start.userId), lt(session.expires, sql`now()`)));
    await tx.execute(sql`
      delete from ${session} where session_token in (
        select session_token from ${session} where user_id = ${start.userId}
        order by last_seen_at desc offset ${maxSessions - 1})`);
    await tx.insert(session).values({
      sessionToken: start.tokenHash,
      userId: start.userId,
      userAgent: start.userAgent?.slice(0, 300) ?? null,
      expires: sql`now() + make_interval(days => ${sessionDays})`,
    });
    await writeAudit(tx, { actorId: start.userId, action: "session.start", subject: start.userId });
  });
}

/** A person's sessions, last seen first. At most 50 are kept. */
export async function listSessions(db: Db, me: SessionUser): Promise<SessionView[]> {
  const rows = await db
    .select({
      id: session.id,
      createdAt: session.createdAt,
      lastSeenAt: session.lastSeenAt,
      userAgent: session.userAgent,
    })
    .from(session)
    .where(and(eq(session.userId, me.id), gt(session.expires, sql`now()`)))
    .orderBy(desc(session.lastSeenAt))
    .limit(maxSessions);
  return rows.map((row) => ({
    ...row,
    createdAt: row.createdAt.toISOString(),
    lastSeenAt: row.lastSeenAt.toISOString(),
    current: row.id === me.sessionId,
  }));
}

/** Signs one of a person's sessions out. Error: "absent" when it is not theirs or already gone. */
export async function revokeSession(
  db: Db,
  key: { readonly userId: string; readonly id: string },
): Promise<Result<null, "absent">> {
  return db.transaction(async (tx) => {
    const gone = await tx
      .delete(session)
      .where(and(eq(session.userId, key.userId), eq(session.id, key.id)))
      .returning({ id: session.id });
    if (gone.length === 0) return fail("absent");
    await writeAudit(tx, { actorId: key.userId, action: "session.revoke", subject: key.id });
    return ok(null);
  });
}

/** Signs every other session of a person out. Answers how many. */
export async function revokeOtherSessions(db: Db, me: SessionUser): Promise<number> {
  return db.transaction(async (tx) => {
    const gone = await tx
      .delete(session)
      .where(and(eq(session.userId, me.id), ne(session.id, me.sessionId)))
      .returning({ id: session.id });
    await writeAudit(tx, {
      actorId: me.id,
      action: "session.revoke-others",
      subject: me.id,
      detail: { count: gone.length },
    });
    return gone.length;
  });
}
