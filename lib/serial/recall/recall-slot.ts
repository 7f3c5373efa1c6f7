import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";
import { hasStop } from "@/lib/profile/check/check-profile";
import { checkRecall } from "@/lib/profile/check/check-recall";
import type { Finding } from "@/lib/profile/finding";
import { findSlot } from "@/lib/profile/paths";
import type { ProfileDocument } from "@/lib/profile/document";
import { fail, ok, type Result } from "@/lib/result";
import { documentFromNative } from "@/lib/serial/backup/document";
import type { CompiledDriver, CompiledSetting } from "@/lib/serial/driver/compiled";
import { deviceLimits } from "@/lib/serial/limits";
import type { NativeValues } from "@/lib/serial/native";
import { modeOfSlot } from "@/lib/serial/plan/output-raster";
import { acknowledgementOf } from "@/lib/serial/plan/plan-changes";
import type { Arriving, DeviceSession, RequestError } from "@/lib/serial/session/types";

export type RecallRequest = {
  readonly session: DeviceSession;
  readonly driver: CompiledDriver;
  readonly slot: number;
  /** `unknown`: nothing is recalled before the owner has acknowledged that. */
  readonly screen: ScreenEnvelope | "unknown";
  /** What the slot expects stands in no device: from the last backup's document, where there is one. */
  readonly expects?: SourceFormat | undefined;
  /** Cautions that the owner has acknowledged, as `rule` + " " + `path`. */
  readonly acknowledged: readonly string[];
};

export type RecallOutcome =
  /** A stop: nothing left. */
  | { readonly kind: "stopped"; readonly findings: readonly Finding[] }
  /** Cautions to acknowledge first: nothing left. */
  | { readonly kind: "ask"; readonly findings: readonly Finding[]; readonly toAcknowledge: readonly string[] }
  /** The slot is on, as read back. `rasterOut` where the device can be asked. */
  | { readonly kind: "done"; readonly findings: readonly Finding[]; readonly rasterOut?: RasterTiming | null | undefined }
  /** The recall left once, and another slot is on. */
  | { readonly kind: "other-slot"; readonly activeSlot: number };

/** Readable settings of one slot, or of one mode. */
function keysOf(driver: CompiledDriver, scope: CompiledSetting["scope"], number: number): readonly string[] {
  return driver.settings.filter((setting) => setting.readable && setting.scope === scope && setting.number === number).map(({ key }) => key);
}

/** The slot and its mode as working memory has them now: a recall takes these, whatever a backup says. */
async function readSlot(session: DeviceSession, driver: CompiledDriver, slot: number): Promise<Result<NativeValues, RequestError>> {
  const own = await session.read(keysOf(driver, "slot", slot));
  if (!own.ok) return own;
  const mode = modeOfSlot(driver, new Map(Object.entries(own.value)), slot);
  if (mode === null) return own;
  const timing = await session.read(keysOf(driver, "mode", mode));
  return timing.ok ? ok({ ...own.value, ...timing.value }) : timing;
}

/** What arrives can be read of the input that is on; of another one nobody knows before it is. */
async function readArriving(session: DeviceSession, driver: CompiledDriver): Promise<Result<Arriving | null, RequestError>> {
  if (driver.definition.status.arriving === undefined) return ok(null);
  const arriving = await session.arriving();
  return arriving.ok || arriving.error.code !== "unsupported" ? arriving : ok(null);
}

function unknownScreen(slot: number): Finding {
  return {
    rule: "unknown.screen",
    path: `slots[${slot}]`,
    severity: "caution",
    sentence: "The screen is unknown, so nothing about it was checked.",
    detail: "A signal above or below its range can damage it.",
    slots: [slot],
    remedies: [],
  };
}

type Known = { readonly document: ProfileDocument; readonly arriving: Arriving | null };

function judge({ driver, slot, screen, expects }: RecallRequest, { document, arriving }: Known): readonly Finding[] {
  const known = screen === "unknown" ? undefined : screen;
  const input = findSlot(document, slot)?.input;
  const sameInput = arriving !== null && (input === undefined || input === arriving.input);
  const base = { document, slot, device: deviceLimits(driver.definition), screen: known, source: sameInput ? arriving.format : expects };
  const found = checkRecall({ ...base, nothingArrives: sameInput && arriving.format === null });
  // Whether something arrives on another input shows only when it is on: the idle raster is a caution then.
  const idle = sameInput ? [] : checkRecall({ ...base, nothingArrives: true }).filter(({ rule }) => rule === "screen.idle");
  const perhaps = idle.map((finding): Finding => ({
    ...finding,
    severity: "caution",
    detail: `Whether anything arrives for slot ${slot} shows only when it is on. ${finding.detail ?? ""}`,
  }));
  const told = found.filter(({ rule }) => rule !== "unknown.screen" || known !== undefined);
  return [...told, ...perhaps, ...(known === undefined ? [unknownScreen(slot)] : [])];
}

/**
 * What making a slot active would put on the screen, by what the device holds and what arrives now. Sends queries only.
 *
 * Errors: the session's, where the device could not be asked.
 */
export async function checkSlotRecall(request: RecallRequest): Promise<Result<readonly Finding[], RequestError>> {
  const { session, driver, slot, expects } = request;
  const values = await readSlot(session, driver, slot);
  if (!values.ok) return values;
  const arriving = await readArriving(session, driver);
  if (!arriving.ok) return arriving;
  const document = documentFromNative(driver, values.value);
  const slots = (document.slots ?? []).map((one) => (one.number === slot && expects ? { ...one, expects } : one));
  return ok(judge(request, { document: { ...document, slots }, arriving: arriving.value }));
}

/**
 * Makes a stored slot the active one: checked first, sent once, read back. It is not a write.
 *
 * A stop keeps it from leaving, and so does a caution that is not acknowledged. A lost reply is settled by reading back.
 */
export async function recallSlot(request: RecallRequest): Promise<Result<RecallOutcome, RequestError>> {
  const { session, driver, slot } = request;
  const checked = await checkSlotRecall(request);
  if (!checked.ok) return checked;
  const findings = checked.value;
  if (hasStop(findings)) return ok({ kind: "stopped", findings });
  const cautions = findings.filter(({ severity }) => severity === "caution").map(acknowledgementOf);
  const toAcknowledge = [...new Set(cautions)].filter((one) => !request.acknowledged.includes(one));
  if (toAcknowledge.length > 0) return ok({ kind: "ask", findings, toAcknowledge });
  const sent = await session.recall(slot);
  if (!sent.ok && sent.error.code !== "timeout" && sent.error.code !== "malformed") return fail(sent.error);
  const active = await session.activeSlot();
  if (!active.ok) return active;
  if (active.value !== slot) return ok({ kind: "other-slot", activeSlot: active.value });
  if (driver.definition.status.rasterOut === undefined) return ok({ kind: "done", findings });
  const out = await session.rasterOut();
  return out.ok ? ok({ kind: "done", findings, rasterOut: out.value }) : out;
}
