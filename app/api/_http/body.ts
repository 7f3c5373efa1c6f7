import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";

/** Nesting that a JSON body may have; what is deeper could exhaust the stack of a recursive parser. */
export const maxJsonDepth = 64;

/** Reads a body of at most `maxBytes`. Stops at the limit, whatever the stated length says. */
export async function readBytes(request: Request, maxBytes: number): Promise<Result<Uint8Array, "too-large">> {
  const stated = Number(request.headers.get("content-length") ?? "0");
  if (stated > maxBytes) return fail("too-large");
  if (request.body === null) return ok(new Uint8Array());
  const chunks: Uint8Array[] = [];
  let length = 0;
  const reader: ReadableStreamDefaultReader<Uint8Array> = request.body.getReader();
  // Bounded by maxBytes: each turn adds at least a byte or ends.
  for (;;) {
    const { done, value } = await reader.read();
    if (done) break;
    length += value.byteLength;
    if (length > maxBytes) {
      await reader.cancel();
      return fail("too-large");
    }
    chunks.push(value);
  }
  return ok(join(chunks, length));
}

function join(chunks: readonly Uint8Array[], length: number): Uint8Array {
  const whole = new Uint8Array(length);
  let at = 0;
  for (const chunk of chunks) {
    whole.set(chunk, at);
    at += chunk.byteLength;
  }
  return whole;
}

/** Parses UTF-8 JSON of at most `maxJsonDepth` levels. The error is a sentence for the caller. */
export function parseJson(bytes: Uint8Array): Result<unknown, string> {
  if (bytes.byteLength === 0) return fail("A JSON body is needed.");
  let text: string;
  try {
    text = new TextDecoder("utf-8", { fatal: true }).decode(bytes);
  } catch {
    return fail("The body is not UTF-8.");
  }
  if (jsonDepth(text) > maxJsonDepth) return fail(`The body is nested deeper than ${maxJsonDepth} levels.`);
  try {
    return ok(JSON.parse(text));
  } catch {
    return fail("The body is not JSON.");
  }
}

/** Deepest nesting of brackets outside strings, in one pass. */
function jsonDepth(text: string): number {
  let depth = 0;
  let deepest = 0;
  let inString = false;
  for (let at = 0; at < text.length; at += 1) {
    const character = text[at];
    if (inString) {
      if (character === "\\") at += 1;
      else if (character === '"') inString = false;
    } else if (character === '"') inString = true;
    else if (character === "[" || character === "{") deepest = Math.max(deepest, (depth += 1));
    else if (character === "]" || character === "}") depth -= 1;
  }
  return deepest;
}

/** True when the request's media type is one of `types` (parameters ignored). */
export function hasContentType(request: Request, types: readonly string[]): boolean {
  const given = request.headers.get("content-type")?.split(";")[0]?.trim().toLowerCase() ?? "";
  return types.includes(given);
}
