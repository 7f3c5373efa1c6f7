import "server-only";
import type { ZodType } from "zod";
import type { RouteDeclaration } from "@/app/api/_http/declaration";
import { runRoute } from "@/app/api/_http/pipeline";
import type { CallOutcome, RouteContext, RouteHandler } from "@/app/api/_http/pipeline";
import { isProblem, problem } from "@/app/api/_http/problem";
import { db } from "@/db/client";
import { claimKey, releaseKey, settleKey } from "@/db/queries/idempotency";
import { errorFacts } from "@/lib/server/error-facts";
import { takeAllowance } from "@/lib/server/limits";
import { log } from "@/lib/server/log";
import { getSessionUser } from "@/lib/server/session";

/** A route handler that carries what it declared. */
export type Route<D extends RouteDeclaration> = ((request: Request, context: RouteContext) => Promise<Response>) & {
  readonly declaration: D;
};

/** Every handler that the wrapper made: a test asks whether there is any other. */
const routes = new WeakSet<object>();

/** True for a handler that `withRoute` made. */
export function isRoute(handler: unknown): boolean {
  return typeof handler === "function" && routes.has(handler);
}

const ports = {
  sessionUser: getSessionUser,
  takeAllowance: (key: string, perMinute: number) => takeAllowance(db, key, perMinute),
  claimKey: claimKey.bind(null, db),
  settleKey: settleKey.bind(null, db),
  releaseKey: releaseKey.bind(null, db),
};

/**
 * The one way to declare a route: who may call it, what it takes, how much and how often.
 *
 * The handler gets typed, checked parts and answers with a Response (`respond`, `json` or `problem`). Whatever it
 * throws is a bug: it is logged with the request's id and answered with a bare 500.
 */
export function withRoute<
  const R extends RouteDeclaration["role"],
  P extends ZodType | undefined = undefined,
  Q extends ZodType | undefined = undefined,
  B extends ZodType | undefined = undefined,
  const W extends readonly string[] | undefined = undefined,
>(
  declaration: RouteDeclaration & { role: R; params?: P; query?: Q; body?: B; rawBody?: W },
  handler: RouteHandler<RouteDeclaration & { role: R; params: P; query: Q; body: B; rawBody: W }>,
): Route<RouteDeclaration> {
  const route = async (request: Request, context: RouteContext): Promise<Response> => {
    const requestId = requestIdOf(request);
    const startedMs = performance.now();
    const outcome = await runSafely(requestId, request, () =>
      // The cast widens the handler: runRoute hands it only what it parsed with this very declaration.
      runRoute(ports, { declaration, handler: handler as RouteHandler<RouteDeclaration>, request, requestId, context }),
    );
    log.info({
      requestId,
      method: request.method,
      path: new URL(request.url).pathname,
      status: outcome.response.status,
      durationMs: Math.round(performance.now() - startedMs),
      userId: outcome.userId,
    });
    return finish(outcome.response, requestId);
  };
  routes.add(route);
  return Object.assign(route, { declaration });
}

async function runSafely(requestId: string, request: Request, run: () => Promise<CallOutcome>): Promise<CallOutcome> {
  try {
    return await run();
  } catch (error) {
    log.error({ requestId, method: request.method, path: new URL(request.url).pathname, error: errorFacts(error) });
    return { response: problem(500), userId: undefined };
  }
}

const requestIdShape = /^[0-9a-f-]{36}$/;

/** The id that `proxy.ts` gave the request; a new one where it did not pass there. */
function requestIdOf(request: Request): string {
  const given = request.headers.get("x-request-id") ?? "";
  return requestIdShape.test(given) ? given : crypto.randomUUID();
}

/** Adds the request id, also inside a problem, and keeps answers out of caches unless the route said otherwise. */
async function finish(response: Response, requestId: string): Promise<Response> {
  const headers = new Headers(response.headers);
  headers.set("x-request-id", requestId);
  if (!headers.has("cache-control")) headers.set("cache-control", "no-store");
  if (!isProblem(response)) return new Response(response.body, { status: response.status, headers });
  const body: unknown = await response.json();
  return new Response(JSON.stringify({ ...Object(body), requestId }), { status: response.status, headers });
}
