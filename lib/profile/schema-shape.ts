import { z } from "zod";

/** The schema inside `optional()`. */
function unwrap(schema: unknown): unknown {
  return schema instanceof z.ZodOptional ? unwrap(schema.unwrap()) : schema;
}

/** The fields that a schema knows, in its own order; null where it is no object with fields of its own. */
export function knownFields(schema: unknown): ReadonlyMap<string, unknown> | null {
  const inner = unwrap(schema);
  return inner instanceof z.ZodObject ? new Map(Object.entries(inner.shape)) : null;
}

/** The schema of a list's items; undefined where it is no list. */
export function itemSchema(schema: unknown): unknown {
  const inner = unwrap(schema);
  return inner instanceof z.ZodArray ? inner.element : undefined;
}
