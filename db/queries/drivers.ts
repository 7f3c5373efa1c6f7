import { and, asc, desc, eq, inArray, sql } from "drizzle-orm";
import type { SQL } from "drizzle-orm";
import type { Db } from "@/db/client";
import { isMaintainer, type Asker } from "@/db/queries/askers";
import { pageFrom, readCursor } from "@/db/queries/paging";
import { conformanceReport, driver, driverVersion } from "@/db/schema/driver";
import { driverQuestion } from "@/db/schema/recording";
import { user } from "@/db/schema/user";
import type { DriverQuery, DriverSummary, DriverVersionView } from "@/lib/contracts/driver";
import type { Page, PageQuery } from "@/lib/contracts/page";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";

/** The versions that `asker` may see. */
export function visibleVersions(asker: Asker): SQL | undefined {
  return isMaintainer(asker) ? undefined : inArray(driverVersion.state, ["published", "withdrawn"]);
}

/** A version of a driver by its name. */
export type VersionKey = { readonly slug: string; readonly version: string };

export const named = ({ slug, version }: VersionKey) =>
  and(eq(driverVersion.slug, slug), eq(driverVersion.version, version));

const columns = {
  id: driverVersion.id,
  slug: driverVersion.slug,
  version: driverVersion.version,
  state: driverVersion.state,
  origin: driverVersion.origin,
  note: driverVersion.note,
  hash: driverVersion.hash,
  authorId: user.id,
  authorName: user.name,
  revision: driverVersion.revision,
  createdAt: driverVersion.createdAt,
  updatedAt: driverVersion.updatedAt,
  publishedAt: driverVersion.publishedAt,
  withdrawnAt: driverVersion.withdrawnAt,
  withdrawnReason: driverVersion.withdrawnReason,
};

/** Versions with their author and the latest report of the very definition that stands, in one query. */
function selectVersions(db: Db) {
  const last = db
    .select({
      id: conformanceReport.id,
      green: conformanceReport.green,
      createdAt: conformanceReport.createdAt,
    })
    .from(conformanceReport)
    .where(and(eq(conformanceReport.versionId, driverVersion.id), eq(conformanceReport.driverHash, driverVersion.hash)))
    .orderBy(desc(conformanceReport.createdAt), desc(conformanceReport.id))
    .limit(1)
    .as("last_report");
  return db
    .select({ ...columns, reportId: last.id, reportGreen: last.green, reportAt: last.createdAt })
    .from(driverVersion)
    .leftJoin(user, eq(user.id, driverVersion.authorId))
    .leftJoinLateral(last, sql`true`);
}

type Row = Awaited<ReturnType<typeof selectVersions>>[number];

function viewOf({ authorId, authorName, reportId, reportGreen, reportAt, ...row }: Row): DriverVersionView {
  const author = authorId === null ? null : { id: authorId, name: authorName ?? "" };
  const hasReport = reportId !== null && reportGreen !== null && reportAt !== null;
  return {
    ...row,
    author,
    report: hasReport ? { id: reportId, green: reportGreen, createdAt: reportAt.toISOString() } : null,
    createdAt: row.createdAt.toISOString(),
    updatedAt: row.updatedAt.toISOString(),
    publishedAt: row.publishedAt?.toISOString() ?? null,
    withdrawnAt: row.withdrawnAt?.toISOString() ?? null,
  };
}

/** A driver's versions, highest first. Errors: "bad-cursor"; "absent" when there is nothing that the asker may see. */
export async function listVersions(
  db: Db,
  asker: Asker,
  slug: string,
  { cursor, limit }: PageQuery,
): Promise<Result<Page<DriverVersionView>, "bad-cursor" | "absent">> {
  const from = readCursor(cursor, "text");
  if (!from.ok) return from;
  if (from.value !== null && !/^\d{1,4}(\.\d{1,4}){2}$/.test(from.value.after)) return fail("bad-cursor");
  const rows = await selectVersions(db)
    .where(
      and(
        eq(driverVersion.slug, slug),
        visibleVersions(asker),
        from.value === null
          ? undefined
          : sql`(${driverVersion.versionOrder}, ${driverVersion.id}) < (string_to_array(${from.value.after}, '.')::int[], ${from.value.id}::uuid)`,
      ),
    )
    .orderBy(desc(driverVersion.versionOrder), desc(driverVersion.id))
    .limit(limit + 1);
  if (rows.length === 0 && from.value === null) return fail("absent");
  return ok(pageFrom(rows, limit, ({ version, id }) => ({ after: version, id }), viewOf));
}

/** A version as lists show it. Error: "absent" where there is none that the asker may see. */
export async function findVersion(db: Db, asker: Asker, key: VersionKey): Promise<Result<DriverVersionView, "absent">> {
  const [row] = await selectVersions(db).where(and(named(key), visibleVersions(asker)));
  return row === undefined ? fail("absent") : ok(viewOf(row));
}

export type StoredDefinition = Readonly<Record<string, unknown>>;

/** What a version says, as it was written. Error: "absent" where there is none that the asker may see. */
export async function readDefinition(
  db: Db,
  asker: Asker,
  key: VersionKey,
): Promise<Result<{ readonly definition: StoredDefinition; readonly hash: string }, "absent">> {
  const [row] = await db
    .select({ definition: driverVersion.definition, hash: driverVersion.hash })
    .from(driverVersion)
    .where(and(named(key), visibleVersions(asker)));
  return row === undefined ? fail("absent") : ok(row);
}

/** The highest published version of a driver, with its note. Null: there is none. */
export async function latestPublished(db: Db, slug: string): Promise<{ version: string; note: string } | null> {
  const [row] = await db
    .select({ version: driverVersion.version, note: driverVersion.note })
    .from(driverVersion)
    .where(and(eq(driverVersion.slug, slug), eq(driverVersion.state, "published")))
    .orderBy(desc(driverVersion.versionOrder))
    .limit(1);
  return row ?? null;
}

/** As JSON of the database, whose times have other digits than ours. A published version compiles, so it has these fields. */
type LatestRow = NonNullable<DriverSummary["latest"]>;

const isoTime = (text: string) => new Date(text).toISOString();

function latestOf({ publishedAt, report, ...row }: LatestRow): LatestRow {
  return {
    ...row,
    publishedAt: isoTime(publishedAt),
    report: report && { green: report.green, createdAt: isoTime(report.createdAt) },
  };
}

/** With its table's name: a query of one table names columns alone, and in a subquery that is another table's column. */
const outerSlug = sql`${driver}.slug`;

const summaryColumns = {
  slug: driver.slug,
  maker: driver.maker,
  model: driver.model,
  latest: sql<LatestRow | null>`(
    select json_build_object('version', v.version, 'publishedAt', v.published_at,
      'protocol', v.definition->'protocol'->>'kind',
      'firmware', json_build_object('min', v.definition->'firmware'->>'min', 'max', v.definition->'firmware'->>'max'),
      'report', (select json_build_object('green', r.green, 'createdAt', r.created_at) from ${conformanceReport} r
        where r.version_id = v.id and r.driver_hash = v.hash order by r.created_at desc, r.id desc limit 1))
    from ${driverVersion} v where v.slug = ${outerSlug} and v.state = 'published' order by v.version_order desc limit 1)`,
  versions: sql<number>`(select count(*)::int from ${driverVersion} v where v.slug = ${outerSlug} and v.state in ('published', 'withdrawn'))`,
  unpublished: sql<number>`(select count(*)::int from ${driverVersion} v where v.slug = ${outerSlug} and v.state in ('draft', 'conformance'))`,
  openQuestions: sql<number>`(select count(*)::int from ${driverQuestion} q where q.driver_slug = ${outerSlug} and q.answer is null)`,
};

/** Every driver that the asker may see, by maker and model. Error: "bad-cursor". */
export async function listDrivers(
  db: Db,
  asker: Asker,
  { cursor, limit }: DriverQuery,
): Promise<Result<Page<DriverSummary>, "bad-cursor">> {
  const from = readSlugCursor(cursor);
  if (!from.ok) return from;
  const rows = await db
    .select(summaryColumns)
    .from(driver)
    .where(
      and(
        isMaintainer(asker)
          ? undefined
          : sql`exists (select from ${driverVersion} v where v.slug = ${outerSlug} and v.state in ('published', 'withdrawn'))`,
        from.value === null
          ? undefined
          : sql`(${driver.maker}, ${driver.model}, ${driver.slug}) > (${from.value[0]}, ${from.value[1]}, ${from.value[2]})`,
      ),
    )
    .orderBy(asc(driver.maker), asc(driver.model), asc(driver.slug))
    .limit(limit + 1);
  const shown = rows.slice(0, limit);
  const last = shown.at(-1);
  const more = rows.length > limit && last !== undefined;
  const items = shown.map(({ latest, ...row }): DriverSummary => ({
    ...row,
    latest: latest && latestOf(latest),
    unpublished: isMaintainer(asker) ? row.unpublished : 0,
    openQuestions: isMaintainer(asker) ? row.openQuestions : 0,
  }));
  return ok({ items, nextCursor: more ? writeSlugCursor([last.maker, last.model, last.slug]) : null });
}

type SlugCursor = readonly [maker: string, model: string, slug: string];

const writeSlugCursor = (place: SlugCursor) => Buffer.from(JSON.stringify(place)).toString("base64url");

/** Drivers are few and have no id, so their cursor is their place in the order itself. */
function readSlugCursor(text: string | undefined): Result<SlugCursor | null, "bad-cursor"> {
  if (text === undefined) return ok(null);
  let parts: unknown;
  try {
    parts = JSON.parse(Buffer.from(text, "base64url").toString());
  } catch (error) {
    if (error instanceof SyntaxError) return fail("bad-cursor");
    throw error;
  }
  const whole =
    Array.isArray(parts) &&
    parts.length === 3 &&
    parts.every((part) => typeof part === "string" && !part.includes("\0"));
  // The cast holds: three texts, as was just seen.
  return whole ? ok(parts as unknown as SlugCursor) : fail("bad-cursor");
}
