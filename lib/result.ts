/**
 * Expected failures as values: where bytes, documents, users or the network come in.
 *
 * `E` is a closed union of string codes, or of objects with a `code`.
 */
export type Result<T, E> = { readonly ok: true; readonly value: T } | { readonly ok: false; readonly error: E };

/** A success that carries `value`. */
export function ok<T>(value: T): { readonly ok: true; readonly value: T } {
  return { ok: true, value };
}

/** A failure that carries `error`. */
export function fail<E>(error: E): { readonly ok: false; readonly error: E } {
  return { ok: false, error };
}

/** One complaint about a document: where (`slots[2].name`, empty for the whole) and what, in one sentence. */
export type PathMessage = { readonly path: string; readonly message: string };
