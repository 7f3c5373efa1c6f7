import type { RouteContext } from "@/app/api/_http/pipeline";

const origin = "http://127.0.0.1:3000";

type RouteFunction = (request: Request, context: RouteContext) => Promise<Response>;

export type Call = {
  readonly method?: string;
  /** Path and query. */
  readonly path?: string;
  readonly params?: Record<string, string>;
  readonly body?: unknown;
  /** Sent as it is, instead of `body` as JSON. */
  readonly text?: string;
  /** Sent as they are, as `application/octet-stream`. */
  readonly bytes?: Uint8Array<ArrayBuffer>;
  readonly cookie?: string | undefined;
  readonly headers?: Record<string, string>;
};

/** Calls a route handler as the server would, with a same-origin request. */
export async function call(route: RouteFunction, given: Call = {}): Promise<Response> {
  const { method = "GET", path = "/api/test", params = {}, cookie } = given;
  const headers = new Headers({ host: new URL(origin).host, origin, ...given.headers });
  const text = given.text ?? (given.body === undefined ? undefined : JSON.stringify(given.body));
  const type = given.bytes === undefined ? "application/json" : "application/octet-stream";
  const body = given.bytes ?? text;
  if (body !== undefined && !headers.has("content-type")) headers.set("content-type", type);
  if (cookie !== undefined) headers.set("cookie", cookie);
  const request = new Request(`${origin}${path}`, { method, headers, body });
  return route(request, { params: Promise.resolve(params) });
}

/** The `Cookie` header that a response's `Set-Cookie` lines lead to. */
export function cookieOf(response: Response): string {
  return response.headers
    .getSetCookie()
    .map((line) => line.split(";")[0] ?? "")
    .join("; ");
}

/** A response's JSON as `T`; the tests that use it check what they read. */
export async function bodyOf<T = Record<string, unknown>>(response: Response): Promise<T> {
  return (await response.json()) as T;
}
