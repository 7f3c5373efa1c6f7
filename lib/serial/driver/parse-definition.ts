import { MAX_PROBLEMS, positionPath, schemaProblems } from "@/lib/profile/parse-problems";
import { fail, ok, type PathMessage, type Result } from "@/lib/result";
import { compileDriver } from "./compile";
import type { CompiledDriver } from "./compiled";
import { driverDefinitionSchema, type DriverDefinition } from "./definition";
import { jsonBreak } from "./json-place";

/** Bounds of a definition from a stranger. The shipped ones have 20 KB. Source: the project's own rule. */
export const MAX_DEFINITION_BYTES = 512 * 1024;
const MAX_DEFINITION_DEPTH = 32;

export type ParsedDefinition = { readonly definition: DriverDefinition; readonly driver: CompiledDriver };

const whole = (message: string): PathMessage[] => [{ path: "", message }];

type Visit = { readonly value: unknown; readonly path: readonly PropertyKey[] };

function childrenOf({ value, path }: Visit): Visit[] {
  if (typeof value !== "object" || value === null) return [];
  if (Array.isArray(value)) return value.map((inner: unknown, index) => ({ value: inner, path: [...path, index] }));
  return Object.entries(value).map(([name, inner]) => ({ value: inner as unknown, path: [...path, name] }));
}

function valueProblem({ value, path }: Visit): string | null {
  if (path.length > MAX_DEFINITION_DEPTH) return `Is nested more than ${MAX_DEFINITION_DEPTH} levels deep.`;
  const texts = [value, path.at(-1)].filter((text) => typeof text === "string");
  if (texts.some((text) => !text.isWellFormed())) return "Has half a surrogate pair, which is not Unicode text.";
  if (texts.some((text) => text.includes("\0"))) return "Has a character of code 0.";
  if (path.at(-1) === "__proto__") return "This field name is not allowed.";
  return typeof value === "number" && !Number.isFinite(value) ? "Is a number that is too large." : null;
}

/**
 * What a JSON value must not hold to be stored, hashed and read again as the same. Linear: each value is visited once.
 * @returns complaints by path, `MAX_PROBLEMS` at most
 */
export function storageProblems(value: unknown): PathMessage[] {
  if (typeof value !== "object" || value === null || Array.isArray(value)) return whole("A driver definition is a group of fields in braces.");
  const problems: PathMessage[] = [];
  const open: Visit[] = [{ value, path: [] }];
  for (let visit = open.pop(); visit !== undefined && problems.length < MAX_PROBLEMS; visit = open.pop()) {
    const message = valueProblem(visit);
    if (message === null) open.push(...childrenOf(visit));
    else problems.push({ path: positionPath(visit.path), message });
  }
  return problems;
}

/** Where a text stops being JSON, by line and column counted from 1. */
function whereIn(text: string): string {
  const position = jsonBreak(text) ?? text.length;
  if (text.trim() === "") return "It is empty.";
  const before = text.slice(0, position).split("\n");
  const place = `line ${before.length}, column ${(before.at(-1)?.length ?? 0) + 1}`;
  return position === text.length ? `It ends too early, at ${place}.` : `It breaks off at ${place}.`;
}

/** Reads the JSON text of a definition. Errors: one sentence with line and column, at the empty path. */
export function readDefinitionText(text: string): Result<unknown, PathMessage[]> {
  if (text.length > MAX_DEFINITION_BYTES || new TextEncoder().encode(text).length > MAX_DEFINITION_BYTES) return fail(whole("A driver definition has 512 KiB at most."));
  try {
    return ok(JSON.parse(text) as unknown);
  } catch (error) {
    // A stack that runs out on hostile nesting is the document's fault too.
    if (error instanceof RangeError) return fail(whole("Is nested too deeply."));
    if (!(error instanceof SyntaxError)) throw error;
    return fail(whole(`This is not JSON. ${whereIn(text)}`));
  }
}

/**
 * Reads, checks and compiles a definition from a JSON text or from a value that JSON gave.
 *
 * Errors: what is wrong by path in the definition (`settings[3].wire.read.reply`), 100 complaints at most.
 * Bounds: 512 KiB, 32 levels, 512 settings, `MAX_SETTINGS` of them when slots and modes are counted out.
 */
export function parseDefinition(input: unknown): Result<ParsedDefinition, PathMessage[]> {
  const read = typeof input === "string" ? readDefinitionText(input) : ok(input);
  if (!read.ok) return read;
  const unstorable = storageProblems(read.value);
  if (unstorable.length > 0) return fail(unstorable);
  const parsed = driverDefinitionSchema.safeParse(read.value);
  if (!parsed.success) return fail(schemaProblems(parsed.error));
  const driver = compileDriver(parsed.data);
  return driver.ok ? ok({ definition: parsed.data, driver: driver.value }) : fail(driver.error.slice(0, MAX_PROBLEMS));
}
