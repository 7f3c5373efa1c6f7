import "server-only";
import { sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { rateLimit } from "@/db/schema/rate-limit";

/** Outcome of asking for one more request: with how long to wait where there is none left. */
export type Allowance = { readonly allowed: true } | { readonly allowed: false; readonly retryAfterS: number };

/**
 * Takes one request from a caller's allowance of `perMinute`, shared by all server processes.
 *
 * A leaky bucket (GCRA, ITU-T I.371): the row holds when the bucket is empty again, and a request that would push
 * that past a minute from now is refused without moving it. One statement, so two requests at once cannot both take
 * the last place. Each call also removes at most two rows that say nothing any more, so the table stays as small as
 * the number of callers in the last minute.
 */
export async function takeAllowance(db: Db, key: string, perMinute: number): Promise<Allowance> {
  const spacingS = 60 / perMinute;
  const { rows } = await db.execute<{ taken: boolean; wait_s: number | null }>(sql`
    with swept as (
      delete from ${rateLimit} where key in (
        select key from ${rateLimit} where refilled_at < now() and key <> ${key}
        order by refilled_at limit 2 for update skip locked)
    ), taken as (
      insert into ${rateLimit} as r (key, refilled_at) values (${key}, now() + make_interval(secs => ${spacingS}))
      on conflict (key) do update set refilled_at = greatest(r.refilled_at, now()) + make_interval(secs => ${spacingS})
      where greatest(r.refilled_at, now()) + make_interval(secs => ${spacingS}) <= now() + interval '1 minute'
      returning true
    )
    select exists (select from taken) as taken,
      (select extract(epoch from refilled_at - now())::float8 - 60 + ${spacingS}::float8
       from ${rateLimit} where key = ${key}) as wait_s`);
  const row = rows[0];
  if (row === undefined || row.taken) return { allowed: true };
  return { allowed: false, retryAfterS: Math.max(1, Math.ceil(row.wait_s ?? 1)) };
}
