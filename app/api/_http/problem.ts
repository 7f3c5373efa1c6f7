import type { PathMessage } from "@/lib/result";

/** Every status that a route answers with when it cannot do what was asked. */
export const problemTitles = {
  400: "The request cannot be read",
  401: "Sign in first",
  403: "Not allowed",
  404: "Not found",
  405: "Method not allowed",
  409: "In conflict with what stands",
  410: "No longer there",
  412: "Changed in the meantime",
  413: "Too large",
  415: "Content type not supported",
  422: "Understood, but not acceptable",
  428: "A precondition is missing",
  429: "Too many requests",
  500: "Something failed here",
  503: "Not available now",
} as const;

export type ProblemStatus = keyof typeof problemTitles;

/** What `problem()` adds to a bare status. `code` is a stable word for programs (`stale`, `in-use`). */
export type ProblemExtra = {
  readonly detail?: string | undefined;
  readonly code?: string | undefined;
  readonly errors?: readonly PathMessage[] | undefined;
  readonly headers?: Readonly<Record<string, string>> | undefined;
};

/** The body of a problem. Source: RFC 9457, section 3.1; `errors`, `code` and `requestId` are extensions. */
export type ProblemBody = {
  readonly type: string;
  readonly title: string;
  readonly status: ProblemStatus;
  readonly detail?: string;
  readonly code?: string;
  readonly errors?: readonly PathMessage[];
  readonly requestId?: string;
};

/**
 * A response that says what stood in the way. The wrapper adds the request id.
 *
 * `type` is `about:blank` (RFC 9457, section 4.2.1): the status says the kind, `code` the case.
 */
export function problem(status: ProblemStatus, extra: ProblemExtra = {}): Response {
  const body: ProblemBody = {
    type: "about:blank",
    title: problemTitles[status],
    status,
    ...(extra.detail === undefined ? {} : { detail: extra.detail }),
    ...(extra.code === undefined ? {} : { code: extra.code }),
    ...(extra.errors === undefined ? {} : { errors: extra.errors }),
  };
  return new Response(JSON.stringify(body), {
    status,
    headers: { ...extra.headers, "content-type": "application/problem+json" },
  });
}

/** True when `response` carries a problem document. */
export function isProblem(response: Response): boolean {
  return response.headers.get("content-type")?.startsWith("application/problem+json") ?? false;
}
