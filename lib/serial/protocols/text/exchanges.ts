import { fail, ok, type PathMessage, type Result } from "@/lib/result";
import type { CompiledSetting } from "@/lib/serial/driver/compiled";
import type { ActionName, DriverDefinition, SettingValue, StatusName, TextExchange } from "@/lib/serial/driver/definition";
import { bindTemplate, compileTemplate, leadOf, type Hole, type Template } from "./template";

/** A request and its reply with slot and mode numbers put in. */
export type BoundExchange = {
  readonly request: Template;
  readonly reply: Template;
  /** The request's text up to its first space, question mark or hole: what a refusal names. */
  readonly header: string;
  /** What a reply to this begins with; empty where the reply does not name its request. */
  readonly tag: string;
};

/** The hole of a setting's templates that is its value, by name, in the request (a write's) and in the reply. */
export type SettingExchange = BoundExchange & { readonly requestHole: string | null; readonly replyHole: string };

/** Every exchange of a text driver. */
export type TextExchanges = {
  readonly reads: ReadonlyMap<string, SettingExchange>;
  readonly writes: ReadonlyMap<string, SettingExchange>;
  readonly statuses: ReadonlyMap<StatusName, BoundExchange>;
  readonly actions: ReadonlyMap<ActionName, BoundExchange>;
};

const NUMBER_HOLES = ["slot", "mode"];

function headerOf(request: Template): string {
  const lead = leadOf(request);
  const end = lead.search(/[ ?]/u);
  return end === -1 ? lead : lead.slice(0, end);
}

function bind(exchange: { request: Template; reply: Template }, fields: Record<string, number>): BoundExchange {
  const request = bindTemplate(exchange.request, fields);
  const reply = bindTemplate(exchange.reply, fields);
  const header = headerOf(request);
  const lead = leadOf(reply);
  return { request, reply, header, tag: header !== "" && lead.startsWith(header) ? lead : "" };
}

function compilePair(source: TextExchange, path: string, problems: PathMessage[]): { request: Template; reply: Template } | null {
  const request = compileTemplate(source.request);
  const reply = compileTemplate(source.reply);
  if (!request.ok) problems.push({ path: `${path}.request`, message: request.error });
  if (!reply.ok) problems.push({ path: `${path}.reply`, message: reply.error });
  return request.ok && reply.ok ? { request: request.value, reply: reply.value } : null;
}

const ownHoles = (template: Template) => template.holes.filter((hole) => !NUMBER_HOLES.includes(hole.name));

function fits(hole: Hole, value: SettingValue): boolean {
  if (value.type === "integer") return hole.type === "number";
  if (value.type === "text") return hole.type === "text" && hole.maxLength >= value.maxLength;
  return value.choices.every(({ native }) => (typeof native === "number") === (hole.type === "number"));
}

/** What is wrong with the holes of one template of a setting, in one sentence; null where nothing is. */
function holeProblem(template: Template, value: SettingValue, pattern: string, wantsValue: boolean): string | null {
  const number = pattern.startsWith("slots[*]") ? "slot" : pattern.startsWith("modes[*]") ? "mode" : null;
  const stray = template.holes.find((hole) => NUMBER_HOLES.includes(hole.name) && hole.name !== number);
  if (stray) return `{${stray.name}} has no number in ${pattern}`;
  const own = ownHoles(template);
  if (own.length !== (wantsValue ? 1 : 0)) return wantsValue ? "wants exactly one hole for the value" : "asks for the value, so it has no hole for one";
  const [hole] = own;
  return hole && !fits(hole, value) ? `{${hole.name}} does not hold what the setting holds` : null;
}

type Pair = { readonly request: Template; readonly reply: Template };
type PatternExchanges = { readonly read: Pair | null; readonly write: Pair | null };

function compilePattern(definition: DriverDefinition, index: number, problems: PathMessage[]): PatternExchanges {
  const setting = definition.settings[index];
  const path = `settings[${index}].wire`;
  if (!setting || setting.wire.kind !== "text") {
    problems.push({ path, message: "a text driver wants templates here" });
    return { read: null, write: null };
  }
  const { wire, value, key } = setting;
  if (!wire.read && !wire.write) problems.push({ path, message: "can be neither read nor written" });
  const read = wire.read ? compilePair(wire.read, `${path}.read`, problems) : null;
  const write = wire.write ? compilePair(wire.write, `${path}.write`, problems) : null;
  const complain = (at: string, problem: string | null) => problem && problems.push({ path: `${path}.${at}`, message: problem });
  if (read) {
    complain("read.request", holeProblem(read.request, value, key, false));
    complain("read.reply", holeProblem(read.reply, value, key, true));
  }
  if (write) {
    complain("write.request", holeProblem(write.request, value, key, true));
    complain("write.reply", holeProblem(write.reply, value, key, true));
  }
  return { read, write };
}

function compileOperations<Name extends string>(
  operations: Readonly<Partial<Record<Name, DriverDefinition["status"][StatusName]>>>, path: string, problems: PathMessage[],
): Map<Name, BoundExchange> {
  const compiled = new Map<Name, BoundExchange>();
  // Object.entries widens the keys of a partial record to string.
  for (const [name, operation] of Object.entries(operations) as [Name, DriverDefinition["status"][StatusName]][]) {
    if (!operation) continue;
    if (operation.kind !== "text") {
      problems.push({ path: `${path}.${name}`, message: "a text driver wants templates here" });
      continue;
    }
    const pair = compilePair(operation, `${path}.${name}`, problems);
    if (pair) compiled.set(name, bind(pair, {}));
  }
  return compiled;
}

/** Two requests that begin alike, or two replies that name the same thing, could not be told apart. */
function ambiguities({ reads, writes, statuses, actions }: TextExchanges, pathOf: (key: string) => string): PathMessage[] {
  const problems: PathMessage[] = [];
  const seen = new Map<string, string>();
  const places: Readonly<Record<string, (name: string) => string>> = { read: (key) => `${pathOf(key)}.read`, write: (key) => `${pathOf(key)}.write`, status: (name) => `status.${name}`, action: (name) => `actions.${name}` };
  for (const [kind, group] of Object.entries({ read: reads, write: writes, status: statuses, action: actions })) {
    for (const [name, exchange] of group as ReadonlyMap<string, BoundExchange>) {
      const lead = leadOf(exchange.request);
      const other = seen.get(lead);
      const path = `${places[kind]?.(name) ?? name}.request`;
      if (lead === "") problems.push({ path, message: "has to begin with text" });
      else if (other !== undefined) problems.push({ path, message: `begins like the one of ${other}, for ${name}` });
      seen.set(lead, name);
    }
  }
  return problems.slice(0, 100);
}

/**
 * Compiles every template of a text driver once.
 * @param settings the driver's settings with slots and modes counted out
 * Errors: path and sentence for each template that cannot work.
 */
export function compileExchanges(definition: DriverDefinition, settings: readonly CompiledSetting[]): Result<TextExchanges, PathMessage[]> {
  const problems: PathMessage[] = [];
  const patterns = new Map(definition.settings.map((setting, index) => [setting.key, compilePattern(definition, index, problems)]));
  const statuses = compileOperations(definition.status, "status", problems);
  const actions = compileOperations(definition.actions, "actions", problems);
  if (problems.length > 0) return fail(problems);

  const reads = new Map<string, SettingExchange>();
  const writes = new Map<string, SettingExchange>();
  for (const { key, pattern, scope, number } of settings) {
    const fields: Record<string, number> = scope === "everywhere" ? {} : { [scope]: number ?? 0 };
    const { read, write } = patterns.get(pattern) ?? { read: null, write: null };
    if (read) reads.set(key, { ...bind(read, fields), requestHole: null, replyHole: ownHoles(read.reply)[0]?.name ?? "" });
    if (write) writes.set(key, { ...bind(write, fields), requestHole: ownHoles(write.request)[0]?.name ?? "", replyHole: ownHoles(write.reply)[0]?.name ?? "" });
  }
  const exchanges = { reads, writes, statuses, actions };
  const patternOf = new Map(settings.map(({ key, pattern }) => [key, pattern]));
  const indexOf = new Map(definition.settings.map(({ key }, index) => [key, index]));
  const twins = ambiguities(exchanges, (key) => `settings[${indexOf.get(patternOf.get(key) ?? "") ?? 0}].wire`);
  return twins.length > 0 ? fail(twins) : ok(exchanges);
}
