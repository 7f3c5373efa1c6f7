import type { Result } from "@/lib/result";
import type { RasterTiming } from "@/lib/timing/raster";
import type { NativeWrite } from "@/lib/serial/native";
import { readOutput, sameOutput } from "@/lib/serial/plan/output-raster";
import type { PlanStep } from "@/lib/serial/plan/types";
import type { DeviceSession, RequestError, WholeRead, WriteOutcome } from "@/lib/serial/session/types";
import type { EntryBody, RunCore } from "./run-core";
import type { JournalEntry } from "./types";

type RequestEntry = JournalEntry & { kind: "request" };
type RequestBody = EntryBody & { kind: "request" };
export type Direction = RequestEntry["direction"];

/**
 * `lost`: the port, the device's voice or the journal is gone, and the run says so. `failed`: the device said no, or holds
 * another value. `restarted`: it may have started anew, so that nothing of what was written, and no mute, is sure any more.
 */
export type StepOutcome = "done" | "failed" | "restarted" | "lost";

/** What became of a request that leaves once. */
type Sent = "acknowledged" | "unknown" | "refused" | "lost";

function sentOf(result: Result<WriteOutcome, RequestError>): Sent {
  if (result.ok) return result.value.outcome;
  switch (result.error.code) {
    case "lost":
      return "lost";
    case "refused":
    case "busy":
    case "unsupported":
      return "refused";
    case "timeout":
    case "malformed":
    case "aborted":
      return "unknown";
  }
}

function liveSession(core: RunCore): DeviceSession | null {
  if (core.link === "lost" || core.session === null) return null;
  return core.session;
}

/** The whole device, or null: the run is lost. A boot count is journalled when none stands since the last write. */
export async function readWhole(core: RunCore): Promise<WholeRead | null> {
  const session = liveSession(core);
  if (session === null) return null;
  const read = await session.readWhole();
  if (!read.ok) {
    core.lose(read.error.message);
    return null;
  }
  core.lastRead = read.value;
  core.slotOn = read.value.activeSlot;
  const { bootCount } = read.value;
  if (core.facts.bootCount === null && bootCount !== undefined && core.state !== "ready") {
    if (!(await core.record({ kind: "boot-count", bootCount }))) return null;
  }
  return core.link === "lost" ? null : read.value;
}

/** Journals a request before its bytes leave, sends it, and returns what became of it with its step number. */
async function leaveOnce(
  core: RunCore,
  body: RequestBody,
  send: (session: DeviceSession) => Promise<Result<WriteOutcome, RequestError>>,
): Promise<{ readonly number: number; readonly sent: Sent } | null> {
  const session = liveSession(core);
  if (session === null) return null;
  const number = core.facts.nextNumber;
  if (!(await core.record({ ...body, outcome: "leaving" }, number))) return null;
  // The port may have gone while the journal was written: then the bytes never leave.
  if (core.link === "lost") return null;
  const result = await send(session);
  const sent = sentOf(result);
  if (sent === "refused" || sent === "lost") {
    await core.record({ ...body, outcome: sent === "refused" ? "refused" : "unknown" }, number);
  }
  if (sent === "lost" && !result.ok) core.lose(result.error.message);
  return sent === "lost" ? null : { number, sent };
}

async function readBack(core: RunCore, writes: readonly NativeWrite[]): Promise<readonly NativeWrite[] | null> {
  const session = liveSession(core);
  if (session === null) return null;
  const read = await session.read(writes.map(({ key }) => key));
  if (!read.ok) {
    core.lose(read.error.message);
    return null;
  }
  return writes.map(({ key }) => ({ key, value: read.value[key] ?? "" }));
}

/**
 * Whether the device may have started anew since the last whole read. A request that got no answer may have met a device that
 * was starting: what stood in working memory is gone then, and the next write would meet another raster than the plan's.
 *
 * Without a count of starts only a device that stores at once can be believed: all that it loses is its active slot and a mute.
 */
export async function mayHaveRestarted(core: RunCore): Promise<"no" | "perhaps" | "lost"> {
  const session = liveSession(core);
  if (session === null) return "lost";
  const { status, memory } = core.goal.driver.definition;
  const counts = status.bootCount !== undefined;
  if (!counts && (memory.volatileWrites || core.facts.muted)) return "perhaps";
  const answer = await (counts ? session.bootCount() : session.activeSlot());
  if (!answer.ok) {
    core.lose(answer.error.message);
    return "lost";
  }
  return answer.value === (counts ? core.lastRead?.bootCount : core.slotOn) ? "no" : "perhaps";
}

/**
 * One write, read back. A lost reply is unknown until then; what was not stored is set again, within the driver's retries, by
 * a device that has not started anew meanwhile.
 */
async function write(core: RunCore, step: PlanStep & { kind: "write" }, direction: Direction): Promise<StepOutcome> {
  const body: RequestBody = { kind: "request", direction, request: "write", old: step.was, new: step.writes, outcome: "leaving" };
  const { retries } = core.goal.driver.definition.pace;
  for (let attempt = 0; attempt <= retries; attempt += 1) {
    const left = await leaveOnce(core, body, (session) => session.write(step.writes));
    if (left === null) return "lost";
    if (left.sent === "refused") return "failed";
    const found = await readBack(core, step.writes);
    if (found === null) {
      await core.record({ ...body, outcome: "unknown" }, left.number);
      return "lost";
    }
    const stored = found.every(({ value }, at) => value === step.writes[at]?.value);
    const outcome = stored ? "done" : left.sent === "acknowledged" ? "mismatch" : "unknown";
    if (!(await core.record({ ...body, outcome, readBack: found }, left.number))) return "lost";
    if (stored) return "done";
    if (outcome === "mismatch") return "failed";
    const restarted = await mayHaveRestarted(core);
    if (restarted !== "no") return restarted === "lost" ? "lost" : "restarted";
  }
  return "failed";
}

/**
 * What the device answers after a recall: slot, and where it can be read the raster that is out.
 *
 * Where the output does not tell, since nothing arrives, only an acknowledged recall is believed.
 */
async function slotIsOn(core: RunCore, slot: number, raster: RasterTiming | null | undefined, acknowledged: boolean): Promise<"yes" | "no" | "lost"> {
  const session = liveSession(core);
  if (session === null) return "lost";
  const active = await session.activeSlot();
  if (!active.ok) {
    core.lose(active.error.message);
    return "lost";
  }
  core.slotOn = active.value;
  if (active.value !== slot) return "no";
  const { definition } = core.goal.driver;
  if (raster === undefined || definition.timingTakesEffect !== "recall" || definition.status.rasterOut === undefined) return "yes";
  const out = await session.rasterOut();
  if (!out.ok) {
    core.lose(out.error.message);
    return "lost";
  }
  const told = readOutput(core.goal.driver, out.value);
  return (told === undefined ? acknowledged : sameOutput(told, raster)) ? "yes" : "no";
}

/** Makes a slot active, once, and reads back what is on. @param raster what must be out then; undefined where it does not matter */
export async function recall(core: RunCore, slot: number, direction: Direction, raster?: RasterTiming | null): Promise<StepOutcome> {
  const body: RequestBody = { kind: "request", direction, request: "recall", slot, outcome: "leaving" };
  const left = await leaveOnce(core, body, (session) => session.recall(slot));
  if (left === null) return "lost";
  if (left.sent === "refused") return "failed";
  const on = await slotIsOn(core, slot, raster, left.sent === "acknowledged");
  const outcome = on === "yes" ? "done" : on === "no" ? "mismatch" : "unknown";
  if (!(await core.record({ ...body, outcome }, left.number))) return "lost";
  return on === "lost" ? "lost" : on === "yes" ? "done" : "failed";
}

/** One commit. Its acknowledgement proves nothing: a later whole read does. */
export async function commit(core: RunCore, direction: Direction): Promise<"sent" | "lost"> {
  const body: RequestBody = { kind: "request", direction, request: "commit", outcome: "leaving" };
  const left = await leaveOnce(core, body, (session) => session.commit());
  if (left === null) return "lost";
  if (left.sent === "refused") return "sent";
  const outcome = left.sent === "acknowledged" ? "done" : "unknown";
  return (await core.record({ ...body, outcome }, left.number)) ? "sent" : "lost";
}

/** Mutes or unmutes. An absolute order: asked again when its reply is lost, within the driver's retries. */
export async function mute(core: RunCore, on: boolean, direction: Direction): Promise<StepOutcome> {
  const body: RequestBody = { kind: "request", direction, request: "mute", muteOn: on, outcome: "leaving" };
  const { retries } = core.goal.driver.definition.pace;
  for (let attempt = 0; attempt <= retries; attempt += 1) {
    const left = await leaveOnce(core, body, (session) => session.mute(on));
    if (left === null) return "lost";
    if (left.sent === "refused") return "failed";
    const outcome = left.sent === "acknowledged" ? "done" : "unknown";
    if (!(await core.record({ ...body, outcome }, left.number))) return "lost";
    if (outcome === "done") return "done";
  }
  return "failed";
}

/** An order to the device timer. The session asks again when an answer is lost; `refused` means that none is armed. */
export async function timer(
  core: RunCore,
  act: "arm" | "extend" | "confirm" | "disarm",
  seconds?: number,
): Promise<"done" | "refused" | "lost"> {
  const session = liveSession(core);
  if (session === null) return "lost";
  const body: RequestBody = { kind: "request", direction: act === "disarm" ? "back" : "forward", request: act, outcome: "leaving" };
  const number = core.facts.nextNumber;
  if (!(await core.record(body, number)) || core.link === "lost") return "lost";
  if (act === "arm") core.unarmed = false;
  const limit = core.goal.driver.definition.memory.deviceTimer?.maxSeconds ?? 0;
  const answer = await session.timer(act, seconds === undefined ? undefined : Math.min(Math.ceil(seconds), limit));
  if (!answer.ok) {
    await core.record({ ...body, outcome: "unknown" }, number);
    core.lose(answer.error.message);
    return "lost";
  }
  if (act === "confirm" || act === "disarm" || answer.value === "refused") core.unarmed = true;
  if (!(await core.record({ ...body, outcome: answer.value }, number))) return "lost";
  return answer.value;
}

/** One step of a route. */
export function perform(core: RunCore, step: PlanStep, direction: Direction): Promise<StepOutcome> {
  switch (step.kind) {
    case "write":
      return write(core, step, direction);
    case "recall":
      return recall(core, step.slot, direction, step.rasterAfter);
    case "mute":
      return mute(core, step.on, direction);
  }
}
