import { and, eq, isNull } from "drizzle-orm";
import type { Db } from "@/db/client";
import { writeAudit } from "@/db/queries/audit";
import { getBackup } from "@/db/queries/backups";
import type { OwnedKey } from "@/db/queries/paging";
import { backup } from "@/db/schema/backup";
import { plan } from "@/db/schema/plan";
import type { StoredPlan } from "@/db/schema/plan";
import type { PlanView } from "@/lib/contracts/plan";
import type { ProfileDocument } from "@/lib/profile/document";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";
import type { CheckedPlan, PlanInput } from "@/lib/serial/plan/types";
import type { ScreenEnvelope } from "@/lib/timing/envelope";

const columns = {
  id: plan.id,
  deviceId: plan.deviceId,
  backupId: plan.backupId,
  hash: plan.hash,
  checked: plan.checked,
  createdAt: plan.createdAt,
};

type Row = { id: string; deviceId: string; backupId: string; hash: string; checked: StoredPlan; createdAt: Date };

function viewOf({ checked, createdAt, ...row }: Row): PlanView {
  const { way, steps, changedSlots, bytes, seconds } = checked;
  return {
    ...row,
    way,
    writes: steps.flatMap((step) => (step.kind === "write" ? [...step.writes] : [])),
    recalls: steps.flatMap((step) => (step.kind === "recall" ? [step.slot] : [])),
    changedSlots: [...changedSlots],
    bytes,
    seconds,
    createdAt: createdAt.toISOString(),
  };
}

/** What a plan leads to, as it is stored beside what `planChanges` made of it. */
export type StoredTarget =
  | { readonly kind: "revision"; readonly revisionId: string; readonly document: ProfileDocument }
  | { readonly kind: "restore"; readonly backupId: string }
  | { readonly kind: "document"; readonly document: ProfileDocument }
  | { readonly kind: "edits"; readonly target: PlanInput["target"] };

function targetColumns(target: StoredTarget) {
  const made = target.kind === "edits" ? target.target : null;
  return {
    targetKind: target.kind,
    targetRevisionId: target.kind === "revision" ? target.revisionId : null,
    targetBackupId: target.kind === "restore" ? target.backupId : null,
    targetDocument: "document" in target ? target.document : made?.kind === "profile" ? made.document : null,
    targetContent: made?.kind === "restore" ? made.content : null,
  };
}

export type PlanValues = {
  readonly deviceId: string;
  readonly backupId: string;
  readonly target: StoredTarget;
  /** Null: the owner accepted an unknown screen. */
  readonly screen: { readonly id: string; readonly envelope: ScreenEnvelope } | null;
  readonly checked: CheckedPlan;
};

/**
 * Stores a plan that `planChanges` made here, at the server. Its backup can't be deleted from then on.
 * Error: "absent" when the backup was deleted meanwhile.
 */
export async function createPlan(db: Db, ownerId: string, values: PlanValues): Promise<Result<PlanView, "absent">> {
  const { deviceId, backupId, target, screen, checked } = values;
  const { way, steps, changes, changedSlots, byHand, bytes, seconds, rasterBefore, rasterAfter } = checked;
  return db.transaction(async (tx) => {
    // A lock that deleting waits for, so that a backup cannot go between the check and the insert.
    const rested = await tx
      .select({ id: backup.id })
      .from(backup)
      .where(and(eq(backup.ownerId, ownerId), eq(backup.id, backupId), isNull(backup.deletedAt)))
      .for("share");
    if (rested.length === 0) return fail("absent");
    const [made] = await tx
      .insert(plan)
      .values({
        ownerId,
        deviceId,
        backupId,
        ...targetColumns(target),
        leftOut: checked.input.leftOut,
        screen: screen?.envelope ?? null,
        screenId: screen?.id ?? null,
        acceptedUnknown: screen === null,
        acknowledged: checked.input.acknowledged,
        activeSlot: checked.activeSlot,
        driverSlug: checked.driver.slug,
        driverVersion: checked.driver.version,
        hash: checked.hash,
        checked: { way, steps, changes, changedSlots, byHand, bytes, seconds, rasterBefore, rasterAfter },
      })
      .returning(columns);
    if (made === undefined) throw new Error("an insert gave no row");
    await writeAudit(tx, { actorId: ownerId, action: "plan.create", subject: made.id, detail: { kind: target.kind } });
    return ok(viewOf(made));
  });
}

/** What `planChanges` needs to make the plan again, but for the driver, which is named. */
export type StoredInput = Omit<PlanInput, "driver"> & {
  readonly driver: { readonly slug: string; readonly version: string };
};

export type PlanDetail = PlanView & { readonly input: StoredInput };

/** A plan with its whole input, to take its run up again elsewhere. Error: "absent" when it is not the owner's. */
export async function getPlan(db: Db, { ownerId, id }: OwnedKey): Promise<Result<PlanDetail, "absent">> {
  const [row] = await db
    .select()
    .from(plan)
    .where(and(eq(plan.ownerId, ownerId), eq(plan.id, id)));
  if (row === undefined) return fail("absent");
  const rested = await getBackup(db, { ownerId, id: row.backupId });
  if (!rested.ok) return rested;
  const target = await targetOf(db, ownerId, row);
  if (!target.ok) return target;
  const { content, arriving, rasterOut } = rested.value;
  return ok({
    ...viewOf(row),
    input: {
      backup: content,
      target: target.value,
      leftOut: row.leftOut,
      driver: { slug: row.driverSlug, version: row.driverVersion },
      screen: row.screen ?? "accepted-unknown",
      source: arriving,
      activeSlot: row.activeSlot,
      rasterOut,
      acknowledged: row.acknowledged,
    },
  });
}

type TargetColumns = Pick<ReturnType<typeof targetColumns>, "targetBackupId" | "targetDocument" | "targetContent">;

/** The table's own check says that exactly one of the three stands. */
async function targetOf(db: Db, ownerId: string, row: TargetColumns): Promise<Result<PlanInput["target"], "absent">> {
  if (row.targetDocument !== null) return ok({ kind: "profile", document: row.targetDocument });
  if (row.targetContent !== null) return ok({ kind: "restore", content: row.targetContent });
  const found = await getBackup(db, { ownerId, id: row.targetBackupId ?? "" });
  return found.ok ? ok({ kind: "restore", content: found.value.content }) : found;
}
