import "server-only";
import { ZodError } from "zod";
import type { z } from "zod";
import type { Db } from "@/db/client";
import { getBackup } from "@/db/queries/backups";
import type { PlanValues, StoredTarget } from "@/db/queries/plans";
import { findRevision } from "@/db/queries/revisions";
import { getScreen } from "@/db/queries/screens";
import type { BackupDetail } from "@/lib/contracts/backup";
import type { newPlan } from "@/lib/contracts/plan";
import type { ProfileDocument } from "@/lib/profile/document";
import type { Finding } from "@/lib/profile/finding";
import { applyPatch } from "@/lib/profile/paths";
import { fail, ok } from "@/lib/result";
import type { PathMessage, Result } from "@/lib/result";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import { planChanges } from "@/lib/serial/plan/plan-changes";
import { planEdits } from "@/lib/serial/plan/plan-edits";
import type { Planned, PlanInput } from "@/lib/serial/plan/types";
import { findDriver } from "@/lib/server/drivers";

type Asked = z.output<typeof newPlan>;

/** Why there is no plan. `errors` are the stops and the cautions still to acknowledge. */
export type PlanRefusal =
  | { readonly code: "absent" | "no-driver" | "no-screen" | "no-revision" | "no-target" | "other-driver" | "bad-patch" }
  | { readonly code: "no-plan" | "other-hash"; readonly detail: string; readonly errors: readonly PathMessage[] };

/** A target as it is stored, and the planning that leads to it. */
type Route = { readonly target: StoredTarget; readonly planned: Planned };
type Base = Omit<PlanInput, "target" | "leftOut">;

/**
 * Checks and plans again from what is stored here: backup, target, driver version, screen.
 *
 * Nothing of the caller's own reckoning counts but its hash, which has to be the one that comes out.
 */
export async function planAgain(db: Db, ownerId: string, asked: Asked): Promise<Result<PlanValues, PlanRefusal>> {
  const rested = await getBackup(db, { ownerId, id: asked.backupId });
  if (!rested.ok) return fail({ code: "absent" });
  const driver = await findDriver(db, rested.value.content.driver);
  if (!driver.ok) return fail({ code: driver.error });
  const screen = await screenOf(db, ownerId, asked);
  if (!screen.ok) return screen;
  const base = baseOf(rested.value, driver.value, screen.value?.envelope ?? "accepted-unknown", asked.acknowledged);
  const route = await routeTo(db, ownerId, asked, base);
  if (!route.ok) return route;
  const { plan, findings, toAcknowledge } = route.value.planned;
  if (plan === null) return fail({ code: "no-plan", ...refusalOf(findings, toAcknowledge) });
  if (plan.hash !== asked.hash) {
    const detail = "The plan that comes out here is not the one that was reviewed.";
    return fail({ code: "other-hash", detail, errors: [] });
  }
  const { deviceId, id: backupId } = rested.value;
  return ok({ deviceId, backupId, target: route.value.target, screen: screen.value, checked: plan });
}

function baseOf(
  { content, arriving, activeSlot, rasterOut }: BackupDetail,
  driver: DriverDefinition,
  screen: PlanInput["screen"],
  acknowledged: readonly string[],
): Base {
  return { backup: content, driver, screen, source: arriving, activeSlot, rasterOut, acknowledged };
}

async function screenOf(
  db: Db,
  ownerId: string,
  { screen }: Asked,
): Promise<Result<PlanValues["screen"], PlanRefusal>> {
  if (screen === "accepted-unknown") return ok(null);
  const found = await getScreen(db, { ownerId, id: screen.id });
  return found.ok ? ok({ id: found.value.id, envelope: found.value.envelope }) : fail({ code: "no-screen" });
}

async function routeTo(db: Db, ownerId: string, asked: Asked, base: Base): Promise<Result<Route, PlanRefusal>> {
  const { target, leftOut } = asked;
  if (target.kind === "restore") {
    const found = await getBackup(db, { ownerId, id: target.backupId });
    if (!found.ok) return fail({ code: "no-target" });
    const { content } = found.value;
    const { slug, version } = base.driver;
    if (content.driver.slug !== slug || content.driver.version !== version) return fail({ code: "other-driver" });
    return ok({ target, planned: planChanges({ ...base, leftOut, target: { kind: "restore", content } }) });
  }
  if (target.kind === "edits") return tryPatches(() => routeOfEdits(base, target));
  const planDocument = (document: ProfileDocument) =>
    planChanges({ ...base, leftOut, target: { kind: "profile", document } });
  if (target.kind === "document") return ok({ target, planned: planDocument(target.document) });
  const found = await findRevision(db, { askerId: ownerId, id: target.revisionId });
  if (!found.ok) return fail({ code: "no-revision" });
  return tryPatches(() => {
    const document = applyPatch(found.value.document, target.patches);
    return { target: { kind: "revision", revisionId: target.revisionId, document }, planned: planDocument(document) };
  });
}

function routeOfEdits(base: Base, { edits, native }: Extract<Asked["target"], { kind: "edits" }>): Route {
  const planned = planEdits({ ...base, edits, nativeEdits: native });
  // Without a plan nothing is stored, so the target is not looked at.
  const target = planned.plan?.input.target ?? { kind: "profile", document: planned.merged };
  return { target: { kind: "edits", target }, planned };
}

/** Patches come from the network here, so one that names no setting is an expected failure, not a bug. */
function tryPatches(route: () => Route): Result<Route, PlanRefusal> {
  try {
    return ok(route());
  } catch (error) {
    if (error instanceof RangeError || error instanceof ZodError) return fail({ code: "bad-patch" });
    throw error;
  }
}

function refusalOf(findings: readonly Finding[], toAcknowledge: readonly string[]) {
  const stops = findings.filter(({ severity }) => severity === "stop");
  if (stops.length > 0) {
    const errors = stops.map(({ path, sentence }) => ({ path, message: sentence }));
    return {
      detail: `${stops.length === 1 ? "One finding stops" : `${stops.length} findings stop`} this plan.`,
      errors,
    };
  }
  const errors = toAcknowledge.map((caution) => ({ path: caution, message: "Read this caution and tick it first." }));
  return { detail: errors.length > 0 ? "Some cautions were not acknowledged." : "Nothing would change.", errors };
}
