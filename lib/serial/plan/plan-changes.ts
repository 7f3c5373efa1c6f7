import { hashValue } from "@/lib/profile/canonical";
import { checkProfile, hasStop } from "@/lib/profile/check/check-profile";
import type { Finding } from "@/lib/profile/finding";
import type { DeviceLimits } from "@/lib/profile/limits";
import { roundDocument } from "@/lib/profile/round";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { deviceLimits } from "@/lib/serial/limits";
import { compiledDriver } from "./compiled-driver";
import { changesOf, changedSlotsOf, settingsByHand } from "./planned-changes";
import { chooseWay, type ChosenWay } from "./choose-way";
import { planTarget, type PlanTarget } from "./plan-target";
import { stepsCost, wholeReadSeconds } from "./plan-cost";
import type { CheckedPlan, Planned, PlanInput, PlanChange } from "./types";

/** Every plan that was made here. What is not in it was not checked, whatever its type says. */
const checkedPlans = new WeakSet<object>();

/** Whether `planChanges` made this very object. */
export function isCheckedPlan(plan: CheckedPlan): boolean {
  return checkedPlans.has(plan);
}

/** How a caution is acknowledged: its rule and its path. */
export function acknowledgementOf(finding: Finding): string {
  return `${finding.rule} ${finding.path}`;
}

function check(input: PlanInput, limits: DeviceLimits, target: PlanTarget): readonly Finding[] {
  const { screen, source } = input;
  const found = checkProfile({
    document: target.document,
    unchanged: target.unchanged,
    device: limits,
    screen: screen === "accepted-unknown" ? undefined : screen,
    source,
  });
  // A rule that the overlay has told already is not told twice.
  const told = new Set(target.findings.map(acknowledgementOf));
  return [...target.findings, ...found.filter((finding) => !told.has(acknowledgementOf(finding)))];
}

/** The hash of everything that was reviewed: inputs, acknowledged cautions among them, and the requests in order. */
export function planHash(input: PlanInput, steps: CheckedPlan["steps"]): string {
  return hashValue({ input: { ...input, acknowledged: [...input.acknowledged].sort() }, steps });
}

type Made = { readonly driver: CompiledDriver; readonly changes: readonly PlanChange[]; readonly target: PlanTarget; readonly chosen: ChosenWay };

function checkedPlan(input: PlanInput, { driver, changes, target, chosen }: Made): CheckedPlan {
  const { slug, version } = input.driver;
  const { route, rasterBefore } = chosen;
  const plan = {
    hash: planHash(input, route.steps),
    way: route.way,
    driver: { slug, version },
    activeSlot: input.activeSlot,
    steps: route.steps,
    changes,
    changedSlots: changedSlotsOf(driver, input.backup.values, target.values, changes),
    byHand: settingsByHand(driver, input.backup, target),
    rasterBefore,
    rasterAfter: chosen.rasterAfter,
    ...stepsCost(driver, route.steps),
    wholeReadSeconds: wholeReadSeconds(driver),
    input,
  };
  checkedPlans.add(plan);
  // The one place where the brand is given: after the check, the order and its way back were found good.
  return plan as unknown as CheckedPlan;
}

function findingsInOrder(findings: readonly Finding[]): readonly Finding[] {
  const rank = { stop: 0, caution: 1, note: 2 } as const;
  return [...findings].sort((a, b) => rank[a.severity] - rank[b.severity]);
}

/**
 * The changes that take a device from a backup to a target, checked, and the requests that make them in a safe order.
 *
 * The same input gives the same plan and the same hash, in the page and at the server. There is no plan where a check
 * stops it, a caution is not acknowledged, no safe order exists, or nothing changes.
 */
export function planChanges(input: PlanInput): Planned {
  const driver = compiledDriver(input.driver);
  const limits = deviceLimits(input.driver, input.backup.document.madeFor?.driver?.firmware);
  const first = planTarget(input, driver, limits);
  const checked = check(input, limits, first);
  const stopped = hasStop(checked);
  const chosen = stopped ? null : chooseWay(input, driver, first);
  const target = chosen?.target ?? first;
  const moved = target !== first;
  const findings = findingsInOrder([...(moved ? check(input, limits, target) : checked), ...(chosen?.findings ?? [])]);
  const changes = changesOf(driver, input.backup, target.values);
  const acknowledged = new Set(input.acknowledged);
  const toAcknowledge = [...new Set(findings.filter(({ severity }) => severity === "caution").map(acknowledgementOf))].filter(
    (one) => !acknowledged.has(one),
  );
  const way = chosen?.way ?? null;
  const complete = way !== null && !hasStop(findings) && toAcknowledge.length === 0 && changes.length > 0;
  const changed = new Set(changes.map(({ key }) => key));
  return {
    findings,
    changes,
    merged: roundDocument(target.document, limits).document,
    unchangedCount: [...first.named].filter((key) => input.backup.values[key] !== undefined && !changed.has(key)).length,
    toAcknowledge,
    plan: complete ? checkedPlan(input, { driver, changes, target, chosen: way }) : null,
  };
}
