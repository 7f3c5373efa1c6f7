import type { CompiledDriver, WireRequest } from "@/lib/serial/driver/compiled";
import type { ActionName, StatusName } from "@/lib/serial/driver/definition";
import { readsOfAll } from "@/lib/serial/driver/costs";
import { toNative, toNeutral } from "@/lib/serial/driver/neutral";
import { characterMs } from "@/lib/serial/protocols/character-time";
import type { Section } from "./section";

type Rule = { readonly name: string; readonly problem: (driver: CompiledDriver) => string | null };

/** What a driver needs so that a session, a run and a backup can work with it; a schema cannot say these. */
const RULES: readonly Rule[] = [
  { name: "status.identity", problem: ({ definition }) => (definition.status.identity ? null : "Nothing says how to ask who is there.") },
  { name: "status.activeSlot", problem: ({ definition }) => (definition.status.activeSlot ? null : "Nothing says how to ask which slot is on.") },
  {
    name: "memory",
    problem: ({ definition: { memory, actions } }) => {
      if (memory.volatileWrites && !actions.commit) return "Writes are volatile, and no order stores them.";
      return !memory.volatileWrites && actions.commit ? "Every write is stored at once, so an order that stores makes no sense." : null;
    },
  },
  {
    name: "memory.deviceTimer",
    problem: ({ definition: { memory, actions } }) => {
      const orders: readonly ActionName[] = ["armTimer", "extendTimer", "confirmTimer", "disarmTimer"];
      const missing = orders.filter((name) => !actions[name]);
      if (memory.deviceTimer && missing.length > 0) return `There is a device timer without ${missing.join(", ")}.`;
      return !memory.deviceTimer && missing.length < orders.length ? "There are orders for a device timer that is not stated." : null;
    },
  },
  {
    name: "timingTakesEffect",
    problem: ({ definition: { timingTakesEffect, actions, status } }) => {
      if (timingTakesEffect !== "recall") return null;
      if (!actions.recall) return "Timing takes effect when a slot is made active, and no order makes one active.";
      return status.rasterOut ? null : "Timing takes effect when a slot is made active, so the raster that is out has to be readable.";
    },
  },
  {
    name: "actions.muteOn",
    problem: ({ definition: { actions } }) => ((actions.muteOn === undefined) === (actions.muteOff === undefined) ? null : "A mute needs both orders: on and off."),
  },
  { name: "slots[*].mode", problem: slotModeProblem },
  { name: "pace.inFlight", problem: inFlightProblem },
  { name: "pace.replyTimeoutMs", problem: timeoutProblem },
  { name: "settings", problem: wordProblem },
];

function slotModeProblem({ definition, settings }: CompiledDriver): string | null {
  const setting = settings.find(({ pattern }) => pattern === "slots[*].mode");
  if (!setting) return "No setting says which mode a slot puts out.";
  if (setting.value.type !== "integer") return "A slot's mode is a number.";
  const { modes, slots } = definition;
  const last = modes.first + modes.count - 1;
  if (setting.value.max > last) return `A slot can be given mode ${setting.value.max}, and the last one is ${last}.`;
  const least = Math.min(modes.first, slots.emptyMode ?? modes.first);
  return setting.value.min < least ? `A slot can be given mode ${setting.value.min}, which is neither a mode nor empty.` : null;
}

function inFlightProblem(driver: CompiledDriver): string | null {
  if (driver.definition.pace.inFlight === 1) return null;
  const nameless = readsOfAll(driver).find(({ named }) => !named);
  return nameless ? `Several requests under way need replies that name what they answer: “${nameless.label}” has none.` : null;
}

function requestsOf({ codec, definition }: CompiledDriver): readonly WireRequest[] {
  const fields = { slot: definition.slots.first, seconds: 1 };
  // The keys of the definition's records are its status and action names.
  const statuses = (Object.keys(definition.status) as StatusName[]).flatMap((name) => codec.planStatus(name) ?? []);
  return [...statuses, ...(Object.keys(definition.actions) as ActionName[]).flatMap((name) => codec.planAction(name, fields) ?? [])];
}

/** The wait runs from the last byte of a request, so it has to cover the device's work and the reply on the line. */
function timeoutProblem(driver: CompiledDriver): string | null {
  const { pace, transport } = driver.definition;
  const perCharacter = characterMs(transport);
  const slow = [...requestsOf(driver), ...readsOfAll(driver)].find(({ replyBytes }) => pace.workMs + replyBytes * perCharacter > pace.replyTimeoutMs + pace.workMs);
  return slow ? `The reply to “${slow.label}” takes ${Math.round(slow.replyBytes * perCharacter)} ms on the line alone, longer than the wait of ${pace.replyTimeoutMs} ms.` : null;
}

/** Two native values with one neutral word: a backup restored through a document would come back as the first of them. */
function wordProblem({ definition }: CompiledDriver): string | null {
  for (const { key, value } of definition.settings) {
    if (value.type !== "choice" || key.includes("native.")) continue;
    const twin = value.choices.find(({ native }) => toNative(value, toNeutral(value, native) ?? "") !== native);
    if (twin) return `${key}: ${String(twin.native)} and another choice mean the same “${String(twin.neutral)}”.`;
  }
  return null;
}

/** What the definition lacks or contradicts, found without a device. */
export function judgeDefinition(driver: CompiledDriver, section: Section): void {
  for (const { name, problem } of RULES) section.judge(name, problem(driver));
  const { protocol } = driver.definition;
  const checked = protocol.kind !== "text" || (protocol.check?.requiredInReplies ?? false);
  if (!checked) section.note("The line has no check: a flipped byte can be another valid value, so that no wrong value is read is not claimed.");
}
