import { fail, ok, type PathMessage, type Result } from "@/lib/result";
import {
  MAX_DOCUMENT_BYTES,
  MAX_DOCUMENT_DEPTH,
  PROFILE_FORMAT,
  PROFILE_VERSION,
  profileDocumentSchema,
  type ProfileDocument,
} from "./document";
import { MAX_PROBLEMS, positionPath, schemaProblems } from "./parse-problems";
import { itemSchema, knownFields } from "./schema-shape";

export type ParsedDocument = {
  readonly document: ProfileDocument;
  /** Fields that version 1 does not know: kept in the document, and told. */
  readonly unknownFields: readonly PathMessage[];
};

const whole = (message: string): PathMessage[] => [{ path: "", message }];

/** Deepest nesting of a JSON text, counted before it is parsed. Linear; stops at the limit. */
function isTooDeep(text: string): boolean {
  let depth = 0;
  let inText = false;
  for (let at = 0; at < text.length; at += 1) {
    const character = text.charAt(at);
    if (inText) {
      if (character === "\\") at += 1;
      else if (character === '"') inText = false;
    } else if (character === '"') inText = true;
    else if (character === "{" || character === "[") depth += 1;
    else if (character === "}" || character === "]") depth -= 1;
    if (depth > MAX_DOCUMENT_DEPTH) return true;
  }
  return false;
}

function readText(text: string): Result<unknown, PathMessage[]> {
  // A character is one byte at least, so a text with too many is not encoded to be measured.
  if (text.length > MAX_DOCUMENT_BYTES || new TextEncoder().encode(text).length > MAX_DOCUMENT_BYTES) {
    return fail(whole("A profile document is 1 MiB at most."));
  }
  if (isTooDeep(text)) return fail(whole(`A profile document is nested ${MAX_DOCUMENT_DEPTH} levels deep at most.`));
  try {
    return ok(JSON.parse(text) as unknown);
  } catch (error) {
    if (!(error instanceof SyntaxError)) throw error;
    return fail(whole("This is not JSON. A profile is a .porch.json file as Backporch exports it."));
  }
}

/** A value still to be looked at, and how it was reached; paths are only spelt out where something is wrong. */
type Visit = {
  readonly value: unknown;
  readonly depth: number;
  readonly name: PropertyKey | null;
  readonly parent: Visit | null;
};

function pathOf(visit: Visit): string {
  const parts: PropertyKey[] = [];
  for (let at: Visit | null = visit; at !== null; at = at.parent) if (at.name !== null) parts.push(at.name);
  return positionPath(parts.reverse());
}

function pushChildren(open: Visit[], parent: Visit): void {
  const { value } = parent;
  const depth = parent.depth + 1;
  if (Array.isArray(value)) {
    for (const [name, inner] of value.entries()) open.push({ value: inner as unknown, depth, name, parent });
  } else if (typeof value === "object" && value !== null) {
    for (const [name, inner] of Object.entries(value)) open.push({ value: inner as unknown, depth, name, parent });
  }
}

function valueProblem({ value, depth, name }: Visit): string | null {
  if (depth > MAX_DOCUMENT_DEPTH) return `Is nested more than ${MAX_DOCUMENT_DEPTH} levels deep.`;
  if (name === "__proto__") return "This field name is not allowed.";
  const texts = [value, name].filter((text) => typeof text === "string");
  if (texts.some((text) => !text.isWellFormed())) return "Has half a surrogate pair, which is not Unicode text.";
  return null;
}

/** What JSON allows and the document does not, wherever it stands. Linear: each value is visited once. */
function valueProblems(value: unknown): PathMessage[] {
  const problems: PathMessage[] = [];
  const open: Visit[] = [{ value, depth: 0, name: null, parent: null }];
  for (let visit = open.pop(); visit !== undefined && problems.length < MAX_PROBLEMS; visit = open.pop()) {
    const message = valueProblem(visit);
    if (message === null) pushChildren(open, visit);
    else problems.push({ path: pathOf(visit), message });
  }
  return problems;
}

function versionProblems(value: unknown): PathMessage[] {
  if (typeof value !== "object" || value === null || Array.isArray(value)) {
    return whole("A profile document is a group of fields in braces.");
  }
  const format: unknown = "format" in value ? value.format : undefined;
  const version: unknown = "version" in value ? value.version : undefined;
  if (format !== PROFILE_FORMAT) {
    return [{ path: "format", message: `Is not a profile: its format must be "${PROFILE_FORMAT}".` }];
  }
  if (version === PROFILE_VERSION) return [];
  const known = `This Backporch reads version ${PROFILE_VERSION}`;
  if (typeof version !== "number") return [{ path: "version", message: `Must be ${PROFILE_VERSION}. ${known}.` }];
  const way = "Update Backporch, or export the profile again as version 1 where it came from";
  return [{ path: "version", message: `The document is version ${version}. ${known}. ${way}.` }];
}

function unknownFields(schema: unknown, value: unknown, path: readonly PropertyKey[]): PathMessage[] {
  if (Array.isArray(value)) {
    return value.flatMap((item: unknown, index) => unknownFields(itemSchema(schema), item, [...path, index]));
  }
  const known = knownFields(schema);
  if (known === null || typeof value !== "object" || value === null) return [];
  return Object.entries(value).flatMap(([name, inner]) => {
    const at = [...path, name];
    if (known.has(name)) return unknownFields(known.get(name), inner, at);
    return [{ path: positionPath(at), message: "Version 1 does not know this field. It is kept as it is." }];
  });
}

/**
 * Reads a profile document from a JSON text, or from a value that JSON gave.
 *
 * Errors: what is wrong, by position in the file (`slots[2].name`), 100 complaints at most; nothing is half taken.
 * Bounds: 1 MiB, 64 levels, 256 modes, 256 slots; time is linear in the size.
 */
export function parseDocument(input: unknown): Result<ParsedDocument, PathMessage[]> {
  const read = typeof input === "string" ? readText(input) : ok(input);
  if (!read.ok) return read;
  const problems = versionProblems(read.value);
  if (problems.length > 0) return fail(problems);
  const bad = valueProblems(read.value);
  if (bad.length > 0) return fail(bad);
  const parsed = profileDocumentSchema.safeParse(read.value);
  if (!parsed.success) return fail(schemaProblems(parsed.error));
  const unknown = unknownFields(profileDocumentSchema, parsed.data, []).slice(0, MAX_PROBLEMS);
  return ok({ document: parsed.data, unknownFields: unknown });
}
