import { sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { backupContent } from "@/db/schema/backup";

export type ContentPair = { readonly left: string; readonly right: string };

/**
 * How many native values differ between pairs of an owner's contents, counted where they lie.
 * @returns a lookup by pair; equal contents differ in none
 */
export async function changedValues(
  db: Db,
  ownerId: string,
  pairs: readonly ContentPair[],
): Promise<(pair: ContentPair) => number> {
  const counts = new Map<string, number>();
  const unequal = pairs.filter(({ left, right }) => left !== right);
  if (unequal.length > 0) {
    const { rows } = await db.execute<{ left: string; right: string; changed: number }>(sql`
      select p.left, p.right, (
        select count(*)::int from jsonb_each(l.values) a full join jsonb_each(r.values) b using (key)
        where a.value is distinct from b.value) as changed
      from unnest(${sql.param(unequal.map(({ left }) => left))}::text[], ${sql.param(unequal.map(({ right }) => right))}::text[]) p("left", "right")
      join ${backupContent} l on l.owner_id = ${ownerId} and l.hash = p.left
      join ${backupContent} r on r.owner_id = ${ownerId} and r.hash = p.right`);
    for (const row of rows) counts.set(`${row.left} ${row.right}`, row.changed);
  }
  return ({ left, right }) => counts.get(`${left} ${right}`) ?? 0;
}
