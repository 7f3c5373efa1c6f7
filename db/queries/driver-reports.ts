import { and, desc, eq, sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import type { Asker } from "@/db/queries/askers";
import { visibleVersions } from "@/db/queries/drivers";
import { pageFrom, readCursor } from "@/db/queries/paging";
import { conformanceReport, driverVersion } from "@/db/schema/driver";
import { user } from "@/db/schema/user";
import type { ConformanceDetail, ConformanceQuery, ConformanceView } from "@/lib/contracts/conformance";
import type { Page } from "@/lib/contracts/page";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";

const columns = {
  id: conformanceReport.id,
  slug: driverVersion.slug,
  version: driverVersion.version,
  driverHash: conformanceReport.driverHash,
  green: conformanceReport.green,
  outdated: sql<boolean>`${conformanceReport.driverHash} <> ${driverVersion.hash}`,
  authorId: user.id,
  authorName: user.name,
  createdAt: conformanceReport.createdAt,
  sortedBy: sql<string>`${conformanceReport.createdAt}::text`,
};

function selectReports(db: Db) {
  return db
    .select(columns)
    .from(conformanceReport)
    .innerJoin(driverVersion, eq(driverVersion.id, conformanceReport.versionId))
    .leftJoin(user, eq(user.id, conformanceReport.authorId));
}

type Row = Awaited<ReturnType<typeof selectReports>>[number];

function viewOf({ authorId, authorName, sortedBy: _sortedBy, createdAt, ...row }: Row): ConformanceView {
  return {
    ...row,
    author: authorId === null ? null : { id: authorId, name: authorName ?? "" },
    createdAt: createdAt.toISOString(),
  };
}

/** A version's reports, latest first. Errors: "bad-cursor"; "absent" when the asker may not see the version. */
export async function listReports(
  db: Db,
  asker: Asker,
  { slug, version, cursor, limit }: ConformanceQuery,
): Promise<Result<Page<ConformanceView>, "bad-cursor" | "absent">> {
  const from = readCursor(cursor, "time");
  if (!from.ok) return from;
  const [held] = await db
    .select({ id: driverVersion.id })
    .from(driverVersion)
    .where(and(eq(driverVersion.slug, slug), eq(driverVersion.version, version), visibleVersions(asker)));
  if (held === undefined) return fail("absent");
  const rows = await selectReports(db)
    .where(
      and(
        eq(conformanceReport.versionId, held.id),
        from.value === null
          ? undefined
          : sql`(${conformanceReport.createdAt}, ${conformanceReport.id}) < (${from.value.after}::timestamptz, ${from.value.id}::uuid)`,
      ),
    )
    .orderBy(desc(conformanceReport.createdAt), desc(conformanceReport.id))
    .limit(limit + 1);
  return ok(pageFrom(rows, limit, (row) => ({ after: row.sortedBy, id: row.id }), viewOf));
}

/** A report with all that it found. Error: "absent" where there is none that the asker may see. */
export async function getReport(db: Db, asker: Asker, id: string): Promise<Result<ConformanceDetail, "absent">> {
  const [row] = await selectReports(db).where(and(eq(conformanceReport.id, id), visibleVersions(asker)));
  if (row === undefined) return fail("absent");
  const [held] = await db
    .select({ report: conformanceReport.report })
    .from(conformanceReport)
    .where(eq(conformanceReport.id, id));
  return held === undefined ? fail("absent") : ok({ ...viewOf(row), report: held.report });
}
