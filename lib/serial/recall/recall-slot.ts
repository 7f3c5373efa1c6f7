import { fail, ok, type Result } from "@/lib/result";
import { checkRecall } from "@/lib/profile/check/check-recall";
import { deviceLimits } from "@/lib/serial/limits";
import type { Finding } from "@/lib/profile/finding";
import type { ProfileDocument } from "@/lib/profile/document";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import type { Arriving, DeviceSession } from "@/lib/serial/session/types";

export type RecallRequest = {
  readonly session: DeviceSession;
  readonly driver: DriverDefinition;
  /** What working memory holds now: a recall takes the slot as it stands there. */
  readonly document: ProfileDocument;
  readonly slot: number;
  readonly screen: ScreenEnvelope | undefined;
  readonly arriving: Arriving | null;
  /** The owner has read the cautions, or accepts that no screen is known. No word leads past a stop. */
  readonly isAccepted: boolean;
};

export type RecallProblem =
  /** A stop, or something to read first: the request did not leave. */
  | { readonly code: "held"; readonly findings: readonly Finding[] }
  /** It left, and the device has another slot on. */
  | { readonly code: "not-recalled"; readonly activeSlot: number }
  | { readonly code: "line"; readonly message: string };

/** Nothing arrives on the slot's own input, as far as the device says: then the idle raster comes out. */
function nothingArrives(document: ProfileDocument, slot: number, arriving: Arriving | null): boolean {
  const input = document.slots?.find((one) => one.number === slot)?.input;
  return arriving !== null && arriving.format === null && (input === undefined || input === arriving.input);
}

/** What stands in the way of a recall. Pure: nothing is sent. */
export function recallFindings({ driver, document, slot, screen, arriving }: Omit<RecallRequest, "session" | "isAccepted">): Finding[] {
  return checkRecall({
    document, slot, device: deviceLimits(driver), screen,
    source: arriving?.format ?? null, nothingArrives: nothingArrives(document, slot, arriving),
  });
}

/**
 * Makes a stored slot the active one: checked first, sent once, read back.
 *
 * Not a write: nothing that the device stores changes.
 * @returns the slot that is on
 */
export async function recallSlot(request: RecallRequest): Promise<Result<number, RecallProblem>> {
  const findings = recallFindings(request);
  const isStopped = findings.some((finding) => finding.severity === "stop");
  const asksFirst = request.screen === undefined || findings.some((finding) => finding.severity === "caution");
  if (isStopped || (asksFirst && !request.isAccepted)) return fail({ code: "held", findings });
  const sent = await request.session.recall(request.slot);
  if (!sent.ok) return fail({ code: "line", message: sent.error.message });
  // A lost reply means unknown: only the device says which slot is on.
  const active = await request.session.activeSlot();
  if (!active.ok) return fail({ code: "line", message: active.error.message });
  return active.value === request.slot ? ok(active.value) : fail({ code: "not-recalled", activeSlot: active.value });
}
