import type { PathMessage, Result } from "@/lib/result";
import { problem } from "@/app/api/_http/problem";
import type { ProblemStatus } from "@/app/api/_http/problem";

type ErrorCode<E> = E extends string ? E : E extends { readonly code: infer C extends string } ? C : never;

type Success = {
  /** 200 unless given; 204 sends no body. */
  readonly status?: number | undefined;
  readonly headers?: Readonly<Record<string, string>> | undefined;
};

/** JSON with a status and headers. A 204 has no body. */
export function json(value: unknown, { status = 200, headers = {} }: Success = {}): Response {
  if (status === 204) return new Response(null, { status, headers });
  return new Response(JSON.stringify(value), { status, headers: { "content-type": "application/json", ...headers } });
}

/**
 * A result as a response: the value as JSON, or the problem that `statusByCode` names for its code.
 *
 * An error that is an object may carry `detail` and `errors`; both are shown. Every code needs a status, so a new
 * code of a query does not compile until the route answers it.
 */
export function respond<T, E extends string | { readonly code: string }>(
  result: Result<T, E>,
  statusByCode: Readonly<Record<ErrorCode<E>, ProblemStatus>>,
  success: Success | ((value: T) => Success) = {},
): Response {
  if (result.ok) return json(result.value, typeof success === "function" ? success(result.value) : success);
  const { code, detail, errors } = describe(result.error);
  // The cast holds: `code` is read off an E, and the record has a status for each code of E.
  return problem(statusByCode[code as ErrorCode<E>], { code, detail, errors });
}

function describe(error: string | { readonly code: string }): {
  code: string;
  detail?: string | undefined;
  errors?: readonly PathMessage[] | undefined;
} {
  if (typeof error === "string") return { code: error };
  return {
    code: error.code,
    detail: "detail" in error && typeof error.detail === "string" ? error.detail : undefined,
    errors: "errors" in error && Array.isArray(error.errors) ? error.errors : undefined,
  };
}
