import type { SourceFormat } from "@/lib/timing/raster";
import type { DeviceSession, RequestError, WholeRead } from "@/lib/serial/session/types";
import { fail, ok, type Result } from "@/lib/result";
import { differingKeys, type RunGoal } from "./run-goal";

/** Keys that one sentence names; the others are counted. */
const NAMED_KEYS = 3;
/** A field rate is measured: the same format may read a little different each time. Source: the project's own rule. */
const SAME_RATE_SHARE = 0.005;

function sameFormat(a: SourceFormat, b: SourceFormat | null): boolean {
  if (b === null) return false;
  const sameRate = Math.abs(a.fieldRateHz - b.fieldRateHz) <= a.fieldRateHz * SAME_RATE_SHARE;
  return a.activePx === b.activePx && a.activeLines === b.activeLines && a.interlaced === b.interlaced && sameRate;
}

function formatText(format: SourceFormat | null): string {
  if (format === null) return "nothing";
  const scan = format.interlaced ? "interlaced" : "progressive";
  return `${format.activePx} × ${format.activeLines} ${scan} at ${format.fieldRateHz.toFixed(2)} Hz`;
}

/** Where a device is no longer as the backup has it, in one sentence; empty when it is. */
export function backupProblem(goal: RunGoal, read: WholeRead): string {
  const keys = differingKeys(goal.old, read);
  if (keys.length > 0) {
    const more = keys.length - NAMED_KEYS;
    const named = keys.slice(0, NAMED_KEYS).join(", ");
    return `The device is no longer as the backup has it: ${named}${more > 0 ? ` and ${more} more` : ""}. Back it up again.`;
  }
  if (read.activeSlot !== goal.homeSlot) {
    return `Slot ${read.activeSlot} is active; the plan was made with slot ${goal.homeSlot} active.`;
  }
  return "";
}

/**
 * Whether another format arrives than the plan was checked with; empty when not, or when nobody can say.
 *
 * A plan without a source was checked with what each slot expects: then any format will do.
 */
export async function arrivingProblem(goal: RunGoal, session: DeviceSession): Promise<Result<string, RequestError>> {
  const { source } = goal.basis;
  if (source === null || goal.driver.definition.status.arriving === undefined) return ok("");
  const arriving = await session.arriving();
  if (!arriving.ok) return arriving.error.code === "unsupported" ? ok("") : fail(arriving.error);
  const { format } = arriving.value;
  if (sameFormat(source, format)) return ok("");
  return ok(`Another format arrives: ${formatText(format)}, not ${formatText(source)}.`);
}
