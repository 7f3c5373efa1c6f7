import { and, eq, isNull, lt, sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { idempotencyKey } from "@/db/schema/idempotency-key";

export type StoredResponse = {
  readonly status: number;
  readonly headers: Readonly<Record<string, string>>;
  readonly body: string;
};

export type KeyedRequest = { readonly caller: string; readonly key: string; readonly requestHash: string };

/** `first`: go on and answer. `replay`: it was answered. `busy`: it is being answered. `other`: the key is taken. */
export type KeyClaim =
  { readonly kind: "first" | "busy" | "other" } | { readonly kind: "replay"; readonly response: StoredResponse };

/** A claim without an answer is given up after this long: its process died. */
const claimSeconds = 60;
/** Answers are kept for a day. Each claim removes at most this many older ones. */
const sweptAtOnce = 10;

/** Claims a key for its first request, or says what became of it. */
export async function claimKey(db: Db, request: KeyedRequest): Promise<KeyClaim> {
  await db.execute(sql`
    delete from ${idempotencyKey} where (caller, key) in (
      select caller, key from ${idempotencyKey} where created_at < now() - interval '1 day'
      order by created_at limit ${sweptAtOnce} for update skip locked)`);
  await db
    .delete(idempotencyKey)
    .where(
      and(
        ...isKey(request),
        isNull(idempotencyKey.status),
        lt(idempotencyKey.createdAt, sql`now() - make_interval(secs => ${claimSeconds})`),
      ),
    );
  const claimed = await db
    .insert(idempotencyKey)
    .values({ caller: request.caller, key: request.key, requestHash: request.requestHash })
    .onConflictDoNothing()
    .returning({ key: idempotencyKey.key });
  if (claimed.length > 0) return { kind: "first" };
  const [found] = await db
    .select({
      requestHash: idempotencyKey.requestHash,
      status: idempotencyKey.status,
      headers: idempotencyKey.headers,
      body: idempotencyKey.body,
    })
    .from(idempotencyKey)
    .where(and(...isKey(request)));
  // Released between the two statements: the caller may ask again.
  if (found === undefined) return { kind: "busy" };
  if (found.requestHash !== request.requestHash) return { kind: "other" };
  if (found.status === null) return { kind: "busy" };
  return { kind: "replay", response: { status: found.status, headers: found.headers ?? {}, body: found.body ?? "" } };
}

/** Keeps the answer for the key's next requests. */
export async function settleKey(db: Db, request: KeyedRequest, response: StoredResponse): Promise<void> {
  await db
    .update(idempotencyKey)
    .set({ status: response.status, headers: { ...response.headers }, body: response.body })
    .where(and(...isKey(request)));
}

/** Frees a claimed key after a failure of ours, so that the request can be made again. */
export async function releaseKey(db: Db, request: KeyedRequest): Promise<void> {
  await db.delete(idempotencyKey).where(and(...isKey(request), isNull(idempotencyKey.status)));
}

function isKey({ caller, key }: KeyedRequest) {
  return [eq(idempotencyKey.caller, caller), eq(idempotencyKey.key, key)];
}
