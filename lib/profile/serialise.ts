import { profileDocumentSchema, type ProfileDocument } from "./document";
import { itemSchema, knownFields } from "./schema-shape";

/** Names by code unit, so that one document gives one text everywhere. */
function unknownLast(value: object, known: ReadonlyMap<string, unknown>): string[] {
  const names = Object.keys(value);
  const others = names.filter((name) => !known.has(name)).sort((a, b) => (a < b ? -1 : 1));
  return [...[...known.keys()].filter((name) => Object.hasOwn(value, name)), ...others];
}

function ordered(schema: unknown, value: unknown): unknown {
  if (Array.isArray(value)) return value.map((item: unknown) => ordered(itemSchema(schema), item));
  if (typeof value !== "object" || value === null) return value;
  const known = knownFields(schema) ?? new Map<string, unknown>();
  const from = new Map<string, unknown>(Object.entries(value));
  return Object.fromEntries(unknownLast(value, known).map((name) => [name, ordered(known.get(name), from.get(name))]));
}

/**
 * The text of a document (`.porch.json`): fields in the order of the format, unknown ones after them by name,
 * two spaces of indent, one line feed at the end. Equal documents give equal bytes.
 */
export function serialiseDocument(document: ProfileDocument): string {
  return `${JSON.stringify(ordered(profileDocumentSchema, document), null, 2)}\n`;
}
