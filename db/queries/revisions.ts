import { and, desc, eq, sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { pageFrom, readCursor } from "@/db/queries/paging";
import { selectProfiles, summaryOf, visibleTo } from "@/db/queries/profiles";
import type { ProfileRow } from "@/db/queries/profiles";
import { profile, revision } from "@/db/schema/profile";
import { user } from "@/db/schema/user";
import type { Page, PageQuery } from "@/lib/contracts/page";
import type { ProfileDetail, RevisionDetail, RevisionView } from "@/lib/contracts/profile";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";

/** A profile as somebody may see it. */
export type SeenKey = { readonly askerId: string | null; readonly id: string };

const columns = {
  id: revision.id,
  number: revision.number,
  author: { id: user.id, name: user.name },
  documentHash: revision.documentHash,
  note: revision.note,
  createdAt: revision.createdAt,
};

function selectRevisions(db: Db) {
  return db
    .select({ ...columns, profileId: revision.profileId, document: revision.document })
    .from(revision)
    .leftJoin(user, eq(user.id, revision.authorId));
}

type Row = Awaited<ReturnType<typeof selectRevisions>>[number];

function detailOf(row: Row): RevisionDetail {
  return { ...row, createdAt: row.createdAt.toISOString() };
}

async function findProfile(db: Db, { askerId, id }: SeenKey): Promise<ProfileRow | null> {
  const [row] = await selectProfiles(db).where(and(eq(profile.id, id), visibleTo(askerId)));
  return row ?? null;
}

/** A profile with its current revision. Error: "absent" when it is not there or not to be seen. */
export async function getProfile(db: Db, key: SeenKey): Promise<Result<ProfileDetail, "absent">> {
  const row = await findProfile(db, key);
  if (row === null) return fail("absent");
  const current = await getRevision(db, { ...key, number: row.currentRevision });
  if (!current.ok) return current;
  const { fit: _fit, ...summary } = summaryOf(row, key.askerId, null);
  return ok({ ...summary, revision: current.value, createdAt: row.createdAt.toISOString() });
}

/** One revision of a profile. Error: "absent". */
export async function getRevision(
  db: Db,
  key: SeenKey & { readonly number: number },
): Promise<Result<RevisionDetail, "absent">> {
  if ((await findProfile(db, key)) === null) return fail("absent");
  const [row] = await selectRevisions(db).where(and(eq(revision.profileId, key.id), eq(revision.number, key.number)));
  return row === undefined ? fail("absent") : ok(detailOf(row));
}

/** A revision by its own id, where its profile may be seen. Error: "absent". */
export async function findRevision(db: Db, { askerId, id }: SeenKey): Promise<Result<RevisionDetail, "absent">> {
  const [row] = await selectRevisions(db)
    .innerJoin(profile, eq(profile.id, revision.profileId))
    .where(and(eq(revision.id, id), visibleTo(askerId)));
  return row === undefined ? fail("absent") : ok(detailOf(row));
}

/** A profile's revisions, newest first, without their documents. Errors: "absent"; "bad-cursor". */
export async function listRevisions(
  db: Db,
  key: SeenKey,
  { cursor, limit }: PageQuery,
): Promise<Result<Page<RevisionView>, "absent" | "bad-cursor">> {
  const from = readCursor(cursor, "text");
  if (!from.ok) return from;
  if ((await findProfile(db, key)) === null) return fail("absent");
  const before = from.value === null ? undefined : Number(from.value.after);
  if (before !== undefined && !Number.isSafeInteger(before)) return fail("bad-cursor");
  const rows = await db
    .select(columns)
    .from(revision)
    .leftJoin(user, eq(user.id, revision.authorId))
    .where(and(eq(revision.profileId, key.id), before === undefined ? undefined : sql`${revision.number} < ${before}`))
    .orderBy(desc(revision.number))
    .limit(limit + 1);
  return ok(
    pageFrom(
      rows,
      limit,
      (row) => ({ after: String(row.number), id: row.id }),
      (row): RevisionView => ({ ...row, createdAt: row.createdAt.toISOString() }),
    ),
  );
}
