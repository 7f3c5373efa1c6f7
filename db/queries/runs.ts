import { and, desc, eq, notInArray, sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { writeAudit } from "@/db/queries/audit";
import { isUniqueViolation } from "@/db/queries/errors";
import { pageFrom, readCursor } from "@/db/queries/paging";
import type { OwnedKey } from "@/db/queries/paging";
import { backup } from "@/db/schema/backup";
import { plan } from "@/db/schema/plan";
import { run, runStep } from "@/db/schema/run";
import type { Page } from "@/lib/contracts/page";
import type { RunQuery, RunView } from "@/lib/contracts/run";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";
import { FINAL_RUN_STATES } from "@/lib/serial/run/types";

/** A tab that was not heard of for so long is taken to be closed. */
const holderSilenceSeconds = 30;

const columns = {
  id: run.id,
  deviceId: run.deviceId,
  planId: run.planId,
  state: run.state,
  countdownSeconds: run.countdownSeconds,
  holder: run.holder,
  holderSeenAt: run.holderSeenAt,
  lastWord: run.lastWord,
  afterBackupId: run.afterBackupId,
  lastStep: sql<number>`coalesce((select max(s.number) from ${runStep} s where s.run_id = ${run.id}), -1)`,
  createdAt: run.createdAt,
  updatedAt: run.updatedAt,
  endedAt: run.endedAt,
  sortedBy: sql<string>`${run.createdAt}::text`,
};

function selectRuns(db: Db) {
  return db.select(columns).from(run);
}

type Row = Awaited<ReturnType<typeof selectRuns>>[number];

function viewOf({ sortedBy: _sortedBy, ...row }: Row): RunView {
  return {
    ...row,
    holderSeenAt: row.holderSeenAt.toISOString(),
    createdAt: row.createdAt.toISOString(),
    updatedAt: row.updatedAt.toISOString(),
    endedAt: row.endedAt?.toISOString() ?? null,
  };
}

function owned({ ownerId, id }: OwnedKey) {
  return and(eq(run.ownerId, ownerId), eq(run.id, id));
}

/** An owner's runs, latest first. Error: "bad-cursor". */
export async function listRuns(
  db: Db,
  ownerId: string,
  { cursor, limit, deviceId, open }: RunQuery,
): Promise<Result<Page<RunView>, "bad-cursor">> {
  const from = readCursor(cursor, "time");
  if (!from.ok) return from;
  const rows = await selectRuns(db)
    .where(
      and(
        eq(run.ownerId, ownerId),
        deviceId === undefined ? undefined : eq(run.deviceId, deviceId),
        open === "true" ? notInArray(run.state, [...FINAL_RUN_STATES]) : undefined,
        from.value === null
          ? undefined
          : sql`(${run.createdAt}, ${run.id}) < (${from.value.after}::timestamptz, ${from.value.id}::uuid)`,
      ),
    )
    .orderBy(desc(run.createdAt), desc(run.id))
    .limit(limit + 1);
  return ok(pageFrom(rows, limit, (row) => ({ after: row.sortedBy, id: row.id }), viewOf));
}

/** Error: "absent" when it is not the owner's. */
export async function getRun(db: Db, key: OwnedKey): Promise<Result<RunView, "absent">> {
  const [row] = await selectRuns(db).where(owned(key));
  return row === undefined ? fail("absent") : ok(viewOf(row));
}

export type RunValues = {
  readonly planId: string;
  /** The plan's hash, as reviewed. */
  readonly planHash: string;
  readonly countdownSeconds: number;
  readonly holder: string;
};

/**
 * Opens a run of a stored plan.
 * Errors: "absent" when the plan is not the owner's; "stale" when the hash is another; "open-run" when the device has
 * one that did not end.
 */
export async function createRun(
  db: Db,
  ownerId: string,
  { planId, planHash, ...values }: RunValues,
): Promise<Result<RunView, "absent" | "stale" | "open-run">> {
  try {
    return await db.transaction(async (tx) => {
      const [planned] = await tx
        .select({ deviceId: plan.deviceId, hash: plan.hash })
        .from(plan)
        .where(and(eq(plan.ownerId, ownerId), eq(plan.id, planId)));
      if (planned === undefined) return fail("absent");
      if (planned.hash !== planHash) return fail("stale");
      const [made] = await tx
        .insert(run)
        .values({ ...values, ownerId, deviceId: planned.deviceId, planId })
        .returning({ id: run.id });
      if (made === undefined) throw new Error("an insert gave no row");
      await writeAudit(tx, { actorId: ownerId, action: "run.create", subject: made.id });
      return getRun(tx, { ownerId, id: made.id });
    });
  } catch (error) {
    if (isUniqueViolation(error, "run_open_idx")) return fail("open-run");
    throw error;
  }
}

/**
 * Gives a run to a tab: its own again, one whose holder is silent, or by `force`.
 * Errors: "absent"; "held" by a tab that was heard lately; "ended".
 */
export async function holdRun(
  db: Db,
  key: OwnedKey,
  { holder, force }: { readonly holder: string; readonly force: boolean },
): Promise<Result<RunView, "absent" | "held" | "ended">> {
  return db.transaction(async (tx) => {
    const [held] = await tx
      .select({
        holder: run.holder,
        endedAt: run.endedAt,
        silent: sql<boolean>`${run.holderSeenAt} < now() - make_interval(secs => ${holderSilenceSeconds})`,
      })
      .from(run)
      .where(owned(key))
      .for("update");
    if (held === undefined) return fail("absent");
    if (held.endedAt !== null) return fail("ended");
    if (held.holder !== holder && !held.silent && !force) return fail("held");
    await tx
      .update(run)
      .set({ holder, holderSeenAt: sql`now()` })
      .where(owned(key));
    if (held.holder !== holder) {
      await writeAudit(tx, { actorId: key.ownerId, action: "run.take-over", subject: key.id, detail: { force } });
    }
    return getRun(tx, key);
  });
}

/** Names the backup that was taken after a run ended. Errors: "absent"; "not-ended"; "no-backup" of that device. */
export async function closeRun(
  db: Db,
  key: OwnedKey,
  afterBackupId: string,
): Promise<Result<RunView, "absent" | "not-ended" | "no-backup">> {
  return db.transaction(async (tx) => {
    const found = await getRun(tx, key);
    if (!found.ok) return found;
    if (found.value.endedAt === null) return fail("not-ended");
    const taken = await tx
      .select({ id: backup.id })
      .from(backup)
      .where(
        and(eq(backup.ownerId, key.ownerId), eq(backup.deviceId, found.value.deviceId), eq(backup.id, afterBackupId)),
      );
    if (taken.length === 0) return fail("no-backup");
    await tx.update(run).set({ afterBackupId }).where(owned(key));
    await writeAudit(tx, { actorId: key.ownerId, action: "run.close", subject: key.id });
    return getRun(tx, key);
  });
}
