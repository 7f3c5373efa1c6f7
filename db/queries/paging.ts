import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";
import type { Page } from "@/lib/contracts/page";

/** What names one row of one owner. */
export type OwnedKey = { readonly ownerId: string; readonly id: string };

/** A place in a list: the sort value of the last row shown, as PostgreSQL writes it, and its id. */
export type Cursor = { readonly after: string; readonly id: string };

const idShape = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;
const timeShape = /^\d{4}-\d\d-\d\d \d\d:\d\d:\d\d(\.\d{1,6})?[+-]\d\d(:\d\d)?$/;

/** An opaque cursor. */
export function writeCursor({ after, id }: Cursor): string {
  return Buffer.from(JSON.stringify([after, id])).toString("base64url");
}

/**
 * Reads a cursor that `writeCursor` made; null stands for the start of the list.
 * @param sort what `after` is: anything else than a time may hold any text. Error: "bad-cursor".
 */
export function readCursor(text: string | undefined, sort: "time" | "text"): Result<Cursor | null, "bad-cursor"> {
  if (text === undefined) return ok(null);
  const [after, id] = partsOf(Buffer.from(text, "base64url").toString());
  if (typeof after !== "string" || typeof id !== "string" || !idShape.test(id)) return fail("bad-cursor");
  if (sort === "time" ? !timeShape.test(after) : after.includes("\0")) return fail("bad-cursor");
  return ok({ after, id });
}

function partsOf(json: string): unknown[] {
  try {
    const parts: unknown = JSON.parse(json);
    return Array.isArray(parts) ? parts : [];
  } catch (error) {
    if (error instanceof SyntaxError) return [];
    throw error;
  }
}

/**
 * A page out of `limit + 1` rows: the row too many only says that there is a next page.
 * @param cursorOf the place of a row in the list
 */
export function pageFrom<Row, T>(
  rows: readonly Row[],
  limit: number,
  cursorOf: (row: Row) => Cursor,
  viewOf: (row: Row) => T,
): Page<T> {
  const shown = rows.slice(0, limit);
  const last = shown.at(-1);
  const more = rows.length > limit && last !== undefined;
  return { items: shown.map(viewOf), nextCursor: more ? writeCursor(cursorOf(last)) : null };
}
