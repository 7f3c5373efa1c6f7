import { and, asc, eq, gt, inArray, max, sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { writeAudit } from "@/db/queries/audit";
import { walkJournal } from "@/db/queries/journal-walk";
import type { JournalRefusal, RunStanding } from "@/db/queries/journal-walk";
import type { OwnedKey } from "@/db/queries/paging";
import { getRun } from "@/db/queries/runs";
import { run, runStep } from "@/db/schema/run";
import type { RunView } from "@/lib/contracts/run";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";
import { reconcileJournals } from "@/lib/serial/run/reconcile-journals";
import { FINAL_RUN_STATES } from "@/lib/serial/run/types";
import type { JournalEntry } from "@/lib/serial/run/types";

export type StepList = { readonly items: readonly JournalEntry[]; readonly more: boolean };

/** A run's journal in order, after step `after`. Error: "absent" when the run is not the owner's. */
export async function listSteps(
  db: Db,
  key: OwnedKey,
  { after, limit }: { readonly after: number; readonly limit: number },
): Promise<Result<StepList, "absent">> {
  const found = await getRun(db, key);
  if (!found.ok) return found;
  const rows = await db
    .select({ entry: runStep.entry })
    .from(runStep)
    .where(and(eq(runStep.runId, key.id), gt(runStep.number, after)))
    .orderBy(asc(runStep.number))
    .limit(limit + 1);
  return ok({ items: rows.slice(0, limit).map(({ entry }) => entry), more: rows.length > limit });
}

export type StepRefusal = JournalRefusal | "absent" | "held";

/**
 * Takes entries into a run's journal, and the run to where they say it stands.
 *
 * Sending the same again changes nothing; of two outcomes of one step the later stays. All entries are taken or none.
 * Errors: "absent"; "held" when another tab runs it; those of `walkJournal`.
 */
export async function appendSteps(
  db: Db,
  key: OwnedKey,
  { holder, entries }: { readonly holder: string; readonly entries: readonly JournalEntry[] },
): Promise<Result<RunView, StepRefusal>> {
  return db.transaction(async (tx) => {
    const [held] = await tx
      .select({ holder: run.holder, state: run.state, lastWord: run.lastWord, keepTaken: run.keepTaken })
      .from(run)
      .where(and(eq(run.ownerId, key.ownerId), eq(run.id, key.id)))
      .for("update");
    if (held === undefined) return fail("absent");
    if (held.holder !== holder) return fail("held");
    const known = await tx
      .select({ entry: runStep.entry })
      .from(runStep)
      .where(
        and(
          eq(runStep.runId, key.id),
          inArray(
            runStep.number,
            entries.map(({ number }) => number),
          ),
        ),
      );
    const [last] = await tx
      .select({ number: max(runStep.number) })
      .from(runStep)
      .where(and(eq(runStep.runId, key.id), eq(runStep.kind, "state")));
    const walked = walkJournal(
      { ...held, lastStateStep: last?.number ?? -1 },
      known.map(({ entry }) => entry),
      entries,
    );
    if (!walked.ok) return walked;
    await storeEntries(
      tx,
      key.id,
      reconcileJournals(
        known.map(({ entry }) => entry),
        entries,
      ),
    );
    for (const standing of walked.value) await moveRun(tx, key, standing);
    await tx
      .update(run)
      .set({ holderSeenAt: sql`now()`, updatedAt: sql`now()` })
      .where(eq(run.id, key.id));
    return getRun(tx, key);
  });
}

async function storeEntries(tx: Db, runId: string, entries: readonly JournalEntry[]): Promise<void> {
  const values = entries.map((entry) => ({
    runId,
    number: entry.number,
    atMs: entry.atMs,
    kind: entry.kind,
    direction: entry.kind === "request" ? entry.direction : null,
    request: entry.kind === "request" ? entry.request : null,
    outcome: entry.kind === "request" ? entry.outcome : null,
    entry,
  }));
  await tx
    .insert(runStep)
    .values(values)
    .onConflictDoUpdate({
      target: [runStep.runId, runStep.number],
      set: {
        atMs: sql`excluded.at_ms`,
        kind: sql`excluded.kind`,
        direction: sql`excluded.direction`,
        request: sql`excluded.request`,
        outcome: sql`excluded.outcome`,
        entry: sql`excluded.entry`,
      },
      setWhere: sql`${runStep.entry} is distinct from excluded.entry`,
    });
}

/** One move or word of a run; the table's own checks judge it once more. */
async function moveRun(tx: Db, key: OwnedKey, { state, cameFrom, lastWord, keepTaken }: RunStanding): Promise<void> {
  const ended = FINAL_RUN_STATES.includes(state);
  await tx
    .update(run)
    .set({
      state,
      lastWord,
      keepTaken,
      ...(cameFrom === null ? {} : { cameFrom }),
      ...(ended ? { endedAt: sql`now()` } : {}),
    })
    .where(and(eq(run.ownerId, key.ownerId), eq(run.id, key.id)));
  if (ended) await writeAudit(tx, { actorId: key.ownerId, action: `run.${state}`, subject: key.id });
}
