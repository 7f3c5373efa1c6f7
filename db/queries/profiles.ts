import { and, desc, eq, isNull, or, sql } from "drizzle-orm";
import type { SQL } from "drizzle-orm";
import type { Db } from "@/db/client";
import { pageFrom, readCursor } from "@/db/queries/paging";
import { profile } from "@/db/schema/profile";
import { screen } from "@/db/schema/screen";
import { user } from "@/db/schema/user";
import type { Page } from "@/lib/contracts/page";
import type { ProfileQuery, ProfileSummary } from "@/lib/contracts/profile";
import { isRasterAllowed } from "@/lib/profile/check/allowed-raster";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";
import type { EnvelopeBand, ScreenEnvelope } from "@/lib/timing/envelope";

const columns = {
  id: profile.id,
  title: profile.title,
  summary: profile.summary,
  owner: { id: user.id, name: user.name },
  visibility: profile.visibility,
  currentRevision: profile.currentRevision,
  outline: profile.outline,
  lineRateMinHz: profile.lineRateMinHz,
  lineRateMaxHz: profile.lineRateMaxHz,
  driverSlug: profile.driverSlug,
  createdAt: profile.createdAt,
  updatedAt: profile.updatedAt,
  sortedBy: sql<string>`${profile.updatedAt}::text`,
};

/** Profiles with their owner's name, before any condition. */
export function selectProfiles(db: Db) {
  return db.select(columns).from(profile).innerJoin(user, eq(user.id, profile.ownerId));
}

export type ProfileRow = Awaited<ReturnType<typeof selectProfiles>>[number];

/** A row as lists show it. `fit` needs a screen. */
export function summaryOf(row: ProfileRow, askerId: string | null, on: ScreenEnvelope | null): ProfileSummary {
  const {
    lineRateMinHz: min,
    lineRateMaxHz: max,
    createdAt: _createdAt,
    sortedBy: _sortedBy,
    updatedAt,
    ...shown
  } = row;
  return {
    ...shown,
    mine: row.owner.id === askerId,
    lineRateHz: min === null || max === null ? null : [min, max],
    fit: on === null ? null : fitOf(row, on),
    updatedAt: updatedAt.toISOString(),
  };
}

function fitOf({ outline }: ProfileRow, on: ScreenEnvelope): { modes: number; fitting: number } {
  const timings = outline.modes.flatMap(({ timing }) => (timing === undefined ? [] : [timing]));
  return { modes: timings.length, fitting: timings.filter((timing) => isRasterAllowed(timing, on)).length };
}

/** What `askerId` may see: everybody's shared profiles and their own. */
export function visibleTo(askerId: string | null): SQL | undefined {
  const shared = eq(profile.visibility, "shared");
  return and(isNull(profile.deletedAt), askerId === null ? shared : or(shared, eq(profile.ownerId, askerId)));
}

/** Beginnings of words, all of them wanted, as PostgreSQL searches for them. Null: nothing to search for. */
export function searchQuery(text: string): string | null {
  const words = text.toLowerCase().match(/[\p{L}\p{N}]+/gu) ?? [];
  return words.length === 0 ? null : words.map((word) => `${word}:*`).join(" & ");
}

function matching(text: string | undefined): SQL | undefined {
  const query = searchQuery(text ?? "");
  return query === null ? undefined : sql`${profile.search} @@ to_tsquery('simple', ${query})`;
}

/** Slowest and fastest line rate both lie in a band. The modes between are judged one by one in `fit`. */
function withinBands(bands: readonly EnvelopeBand[]): SQL | undefined {
  const inBand = (column: typeof profile.lineRateMinHz | typeof profile.lineRateMaxHz) =>
    or(sql`false`, ...bands.map(({ lineRateHz: [min, max] }) => sql`${column} between ${min} and ${max}`));
  return and(inBand(profile.lineRateMinHz), inBand(profile.lineRateMaxHz));
}

async function findEnvelope(db: Db, ownerId: string | null, id: string): Promise<ScreenEnvelope | null> {
  if (ownerId === null) return null;
  const [found] = await db
    .select({ envelope: screen.envelope })
    .from(screen)
    .where(and(eq(screen.ownerId, ownerId), eq(screen.id, id), isNull(screen.deletedAt)));
  return found?.envelope ?? null;
}

/**
 * The library, or one's own profiles, last changed first.
 * @param askerId null: nobody is signed in, and sees what is shared
 * Errors: "bad-cursor"; "no-screen" when the asked screen is not the asker's.
 */
export async function listProfiles(
  db: Db,
  askerId: string | null,
  query: ProfileQuery,
): Promise<Result<Page<ProfileSummary>, "bad-cursor" | "no-screen">> {
  const from = readCursor(query.cursor, "time");
  if (!from.ok) return from;
  const on = query.screenId === undefined ? null : await findEnvelope(db, askerId, query.screenId);
  if (query.screenId !== undefined && on === null) return fail("no-screen");
  const mine = query.mine === "true" && askerId !== null;
  const rows = await selectProfiles(db)
    .where(
      and(
        isNull(profile.deletedAt),
        mine ? eq(profile.ownerId, askerId) : eq(profile.visibility, "shared"),
        matching(query.q),
        query.driverSlug === undefined ? undefined : eq(profile.driverSlug, query.driverSlug),
        on !== null && query.fitting === "true" ? withinBands(on.bands) : undefined,
        from.value === null
          ? undefined
          : sql`(${profile.updatedAt}, ${profile.id}) < (${from.value.after}::timestamptz, ${from.value.id}::uuid)`,
      ),
    )
    .orderBy(desc(profile.updatedAt), desc(profile.id))
    .limit(query.limit + 1);
  return ok(
    pageFrom(
      rows,
      query.limit,
      (row) => ({ after: row.sortedBy, id: row.id }),
      (row) => summaryOf(row, askerId, on),
    ),
  );
}
