import { and, eq, inArray, sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { writeAudit } from "@/db/queries/audit";
import type { Maintaining } from "@/db/queries/askers";
import { findVersion, named, type StoredDefinition, type VersionKey } from "@/db/queries/drivers";
import { isUniqueViolation } from "@/db/queries/errors";
import { conformanceReport, driver, driverVersion } from "@/db/schema/driver";
import type { DriverVersionView } from "@/lib/contracts/driver";
import { hashValue } from "@/lib/profile/canonical";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";
import type { ConformanceReport } from "@/lib/serial/conformance/report";

/** Three numbers of a version. */
export const versionOrder = (version: string): number[] => version.split(".").map(Number);

export type DraftValues = VersionKey & {
  readonly maker: string;
  readonly model: string;
  readonly definition: StoredDefinition;
  readonly note: string;
};

/** Makes the driver where there is none yet. */
async function ensureDriver(
  tx: Db,
  { slug, maker, model }: Pick<DraftValues, "slug" | "maker" | "model">,
): Promise<void> {
  await tx.insert(driver).values({ slug, maker, model }).onConflictDoNothing();
}

/** A version that was just written in this transaction. */
async function written(tx: Db, by: Maintaining, key: VersionKey): Promise<DriverVersionView> {
  const found = await findVersion(tx, by, key);
  if (!found.ok) throw new Error("a version that was written is not there");
  return found.value;
}

/** Begins a version, and the driver with it where it is the first. Error: "known" when this version stands already. */
export async function createDraft(
  db: Db,
  by: Maintaining,
  values: DraftValues,
): Promise<Result<DriverVersionView, "known">> {
  const { slug, version, definition, note } = values;
  try {
    return await db.transaction(async (tx) => {
      await ensureDriver(tx, values);
      const [made] = await tx
        .insert(driverVersion)
        .values({
          slug,
          version,
          versionOrder: versionOrder(version),
          definition,
          hash: hashValue(definition),
          note,
          authorId: by.id,
        })
        .returning({ id: driverVersion.id });
      if (made === undefined) throw new Error("an insert gave no row");
      await writeAudit(tx, { actorId: by.id, action: "driver.draft", subject: made.id, detail: { slug, version } });
      return ok(await written(tx, by, { slug, version }));
    });
  } catch (error) {
    if (isUniqueViolation(error, "driver_version_key")) return fail("known");
    throw error;
  }
}

/** Why an act on a version changed no row. */
async function refusal<E extends string>(
  tx: Db,
  by: Maintaining,
  key: VersionKey,
  revision: number | undefined,
  state: E,
) {
  const found = await findVersion(tx, by, key);
  if (!found.ok) return found;
  return revision !== undefined && found.value.revision !== revision ? fail("stale" as const) : fail(state);
}

type Keyed = VersionKey & { readonly revision: number };

/** What an act found out about the version that it names. */
export type ActError = "absent" | "stale";

/**
 * Changes what an unpublished version says; a candidate is a draft again.
 * Errors: "absent"; "stale"; "published" when it is no draft any more.
 */
export async function changeDraft(
  db: Db,
  by: Maintaining,
  key: Keyed,
  change: { readonly definition: StoredDefinition; readonly note?: string | undefined },
): Promise<Result<DriverVersionView, ActError | "published">> {
  return db.transaction(async (tx) => {
    const changed = await tx
      .update(driverVersion)
      .set({
        ...change,
        hash: hashValue(change.definition),
        cameFrom: sql`case ${driverVersion.state} when 'conformance' then 'conformance' else ${driverVersion.cameFrom} end`,
        state: "draft",
        authorId: by.id,
        revision: sql`${driverVersion.revision} + 1`,
        updatedAt: sql`now()`,
      })
      .where(
        and(
          named(key),
          eq(driverVersion.revision, key.revision),
          inArray(driverVersion.state, ["draft", "conformance"]),
        ),
      )
      .returning({ id: driverVersion.id });
    const [row] = changed;
    if (row === undefined) return refusal(tx, by, key, key.revision, "published");
    await writeAudit(tx, {
      actorId: by.id,
      action: "driver.change",
      subject: row.id,
      detail: { slug: key.slug, version: key.version },
    });
    return ok(await written(tx, by, key));
  });
}

/** Takes an unpublished version away, with its reports. Errors as of `changeDraft`. */
export async function deleteDraft(db: Db, by: Maintaining, key: Keyed): Promise<Result<null, ActError | "published">> {
  return db.transaction(async (tx) => {
    const [row] = await tx
      .delete(driverVersion)
      .where(
        and(
          named(key),
          eq(driverVersion.revision, key.revision),
          inArray(driverVersion.state, ["draft", "conformance"]),
        ),
      )
      .returning({ id: driverVersion.id });
    if (row === undefined) return refusal(tx, by, key, key.revision, "published");
    await writeAudit(tx, {
      actorId: by.id,
      action: "driver.discard",
      subject: row.id,
      detail: { slug: key.slug, version: key.version },
    });
    return ok(null);
  });
}

/**
 * Stores a report that was computed here of the definition as it stood. A draft becomes a candidate by a green one.
 * Errors: "absent"; "stale" when the definition was changed meanwhile.
 */
export async function storeReport(
  db: Db,
  by: Maintaining | null,
  key: VersionKey,
  report: ConformanceReport,
): Promise<Result<{ readonly id: string }, ActError>> {
  return db.transaction(async (tx) => {
    const [held] = await tx
      .select({ id: driverVersion.id, hash: driverVersion.hash, state: driverVersion.state })
      .from(driverVersion)
      .where(named(key))
      .for("update");
    if (held === undefined) return fail("absent");
    if (held.hash !== report.driverHash) return fail("stale");
    const [made] = await tx
      .insert(conformanceReport)
      .values({
        versionId: held.id,
        driverHash: report.driverHash,
        green: report.green,
        report,
        authorId: by?.id ?? null,
      })
      .returning({ id: conformanceReport.id });
    if (made === undefined) throw new Error("an insert gave no row");
    if (held.state === "draft" && report.green) {
      await tx
        .update(driverVersion)
        .set({
          state: "conformance",
          cameFrom: "draft",
          revision: sql`${driverVersion.revision} + 1`,
          updatedAt: sql`now()`,
        })
        .where(eq(driverVersion.id, held.id));
    }
    await writeAudit(tx, {
      actorId: by?.id ?? null,
      action: "driver.conformance",
      subject: held.id,
      detail: { report: made.id, green: report.green },
    });
    return ok(made);
  });
}

/**
 * Publishes a candidate by the latest report of its very definition.
 * Errors: "absent"; "stale"; "not-a-candidate"; "red" when that report is not green.
 */
export async function publishVersion(
  db: Db,
  by: Maintaining,
  key: Keyed,
): Promise<Result<DriverVersionView, ActError | "not-a-candidate" | "red">> {
  return db.transaction(async (tx) => {
    const [held] = await tx
      .select({ id: driverVersion.id, state: driverVersion.state, revision: driverVersion.revision })
      .from(driverVersion)
      .where(named(key))
      .for("update");
    if (held === undefined) return fail("absent");
    if (held.revision !== key.revision) return fail("stale");
    if (held.state !== "conformance") return fail("not-a-candidate");
    const { report } = await written(tx, by, key);
    // A candidate has a report of its definition; a later one, on more recordings, may be red.
    if (report?.green !== true) return fail("red");
    await tx
      .update(driverVersion)
      .set({
        state: "published",
        cameFrom: "conformance",
        reportId: report.id,
        reportGreen: true,
        publishedAt: sql`now()`,
        revision: sql`${driverVersion.revision} + 1`,
        updatedAt: sql`now()`,
      })
      .where(eq(driverVersion.id, held.id));
    await writeAudit(tx, {
      actorId: by.id,
      action: "driver.publish",
      subject: held.id,
      detail: { slug: key.slug, version: key.version, report: report.id },
    });
    return ok(await written(tx, by, key));
  });
}

/** Takes a published version back; devices that use it are told. Errors: "absent"; "stale"; "not-published". */
export async function withdrawVersion(
  db: Db,
  by: Maintaining,
  key: Keyed,
  reason: string,
): Promise<Result<DriverVersionView, ActError | "not-published">> {
  return db.transaction(async (tx) => {
    const [row] = await tx
      .update(driverVersion)
      .set({
        state: "withdrawn",
        cameFrom: "published",
        withdrawnAt: sql`now()`,
        withdrawnReason: reason,
        revision: sql`${driverVersion.revision} + 1`,
        updatedAt: sql`now()`,
      })
      .where(and(named(key), eq(driverVersion.revision, key.revision), eq(driverVersion.state, "published")))
      .returning({ id: driverVersion.id });
    if (row === undefined) return refusal(tx, by, key, key.revision, "not-published");
    await writeAudit(tx, {
      actorId: by.id,
      action: "driver.withdraw",
      subject: row.id,
      detail: { slug: key.slug, version: key.version },
    });
    return ok(await written(tx, by, key));
  });
}
