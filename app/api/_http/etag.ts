import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";

/** An entity tag for a version: a revision's number, a plan's hash. Source: RFC 9110, section 8.8.3. */
export function etag(version: string | number): string {
  return `"${version}"`;
}

/**
 * The version that an `If-Match` names, null where there is none or it is `*`.
 * Error: "malformed" where it is not one strong entity tag (weak ones never match: RFC 9110, section 13.1.1).
 */
export function readIfMatch(request: Request): Result<string | null, "malformed"> {
  const header = request.headers.get("if-match");
  if (header === null || header.trim() === "*") return ok(null);
  const match = /^\s*"([\x21\x23-\x7e]*)"\s*$/.exec(header);
  return match?.[1] === undefined ? fail("malformed") : ok(match[1]);
}
