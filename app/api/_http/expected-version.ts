import { readIfMatch } from "@/app/api/_http/etag";
import { problem } from "@/app/api/_http/problem";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";

/**
 * The version that a change rests on, from `If-Match`; undefined where the caller named none.
 * Error: the response to give. Names that are no version of ours match nothing, so they are 412.
 */
export function expectedVersion(request: Request): Result<number | undefined, Response> {
  const given = readIfMatch(request);
  if (!given.ok) return fail(problem(400, { errors: [{ path: "If-Match", message: "Is not one entity tag." }] }));
  if (given.value === null) return ok(undefined);
  return /^[1-9]\d{0,8}$/.test(given.value) ? ok(Number(given.value)) : fail(problem(412, { code: "stale" }));
}

/** As `expectedVersion`, for changes that must name what they rest on: 428 where none is named. */
export function requiredVersion(request: Request): Result<number, Response> {
  const version = expectedVersion(request);
  if (!version.ok) return version;
  if (version.value !== undefined) return ok(version.value);
  return fail(problem(428, { detail: "Name the version that this rests on in If-Match." }));
}
