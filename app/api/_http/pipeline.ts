import type { z } from "zod";
import type { ZodType } from "zod";
import { hasContentType, parseJson, readBytes } from "@/app/api/_http/body";
import { clientAddress } from "@/app/api/_http/client-address";
import { defaultBodyBytes, includesRole, requestsPerMinute } from "@/app/api/_http/declaration";
import type { RouteDeclaration, SessionUser } from "@/app/api/_http/declaration";
import { withIdempotency } from "@/app/api/_http/idempotency";
import type { IdempotencyStore } from "@/app/api/_http/idempotency";
import { isForeignOrigin, isUnsafe } from "@/app/api/_http/origin";
import { problem } from "@/app/api/_http/problem";
import { fail, ok } from "@/lib/result";
import type { PathMessage, Result } from "@/lib/result";

/** What the wrapper needs from outside. The real ones are bound in `with-route.ts`. */
export type RoutePorts = IdempotencyStore & {
  readonly sessionUser: (request: Request) => Promise<SessionUser | null>;
  /** Takes one request from a caller's allowance. */
  readonly takeAllowance: (
    key: string,
    perMinute: number,
  ) => Promise<{ allowed: true } | { allowed: false; retryAfterS: number }>;
};

/** Everything about a request that a handler may use: checked, parsed and typed. */
export type RouteInput<D extends RouteDeclaration> = {
  readonly request: Request;
  readonly requestId: string;
  readonly user: D["role"] extends "anyone" ? SessionUser | null : SessionUser;
  readonly params: Parsed<D["params"]>;
  readonly query: Parsed<D["query"]>;
  readonly body: D["rawBody"] extends readonly string[] ? Uint8Array : Parsed<D["body"]>;
};

type Parsed<S> = S extends ZodType ? z.output<S> : undefined;

export type RouteHandler<D extends RouteDeclaration> = (input: RouteInput<D>) => Response | Promise<Response>;

/** The second argument of a route handler. Source: Next's route handlers ("context"). */
export type RouteContext = { params: Promise<Record<string, string | string[] | undefined>> };

type Call<D extends RouteDeclaration> = {
  readonly declaration: D;
  readonly handler: RouteHandler<D>;
  readonly request: Request;
  readonly requestId: string;
  readonly context: RouteContext;
};

/** What is known of a call once it ran, for the log. */
export type CallOutcome = { readonly response: Response; readonly userId: string | undefined };

/**
 * Runs one request through every check that its route declares, in the order in which they cost least:
 * origin, session, allowance, role, path, query, body, idempotency, handler. Bugs of the handler throw through.
 */
export async function runRoute<D extends RouteDeclaration>(ports: RoutePorts, call: Call<D>): Promise<CallOutcome> {
  const { declaration, request } = call;
  if (isUnsafe(request.method) && isForeignOrigin(request)) {
    const detail = "This request came from another site, so nothing was done.";
    return { response: problem(403, { code: "foreign-origin", detail }), userId: undefined };
  }
  const user = await ports.sessionUser(request);
  const end = (response: Response): CallOutcome => ({ response, userId: user?.id });
  const refused = await refuseCaller(ports, declaration, request, user);
  if (refused !== null) return end(refused);
  const shapes = parseShapes(declaration, request, await call.context.params);
  if (!shapes.ok) return end(problem(400, { errors: shapes.error }));
  const body = await readBody(declaration, request);
  if (!body.ok) return end(body.error);

  // The casts hold: each part was parsed with the schema that D names, and the role was checked above.
  const input = {
    request,
    requestId: call.requestId,
    user,
    params: shapes.value.params,
    query: shapes.value.query,
    body: body.value.parsed,
  } as unknown as RouteInput<D>;
  const caller = user?.id ?? `address:${clientAddress(request)}`;
  const answer = await withIdempotency(ports, { request, caller, bodyBytes: body.value.bytes }, async () =>
    call.handler(input),
  );
  return end(answer);
}

async function refuseCaller(
  ports: RoutePorts,
  declaration: RouteDeclaration,
  request: Request,
  user: SessionUser | null,
): Promise<Response | null> {
  const limited = declaration.limit?.unlimited ? null : await refuseOften(ports, declaration, request, user);
  if (limited !== null) return limited;
  if (declaration.role === "anyone") return null;
  if (user === null) return problem(401, { headers: { "www-authenticate": 'Session realm="Backporch"' } });
  return includesRole(user.role, declaration.role) ? null : problem(403, { code: "role" });
}

async function refuseOften(
  ports: RoutePorts,
  declaration: RouteDeclaration,
  request: Request,
  user: SessionUser | null,
): Promise<Response | null> {
  const perMinute = requestsPerMinute(declaration);
  const allowance = await ports.takeAllowance(allowanceKey(declaration, request, user, perMinute), perMinute);
  if (allowance.allowed) return null;
  const detail = `Try again in ${allowance.retryAfterS} s.`;
  return problem(429, { detail, headers: { "retry-after": String(allowance.retryAfterS) } });
}

/** Routes with the same limit share one count; a route that counts each address has its own. */
function allowanceKey(declaration: RouteDeclaration, request: Request, user: SessionUser | null, perMinute: number) {
  const address = clientAddress(request);
  if (declaration.limit?.perAddress) return `address:${address}:${new URL(request.url).pathname}`;
  return user === null ? `address:${address}:${perMinute}` : `user:${user.id}:${perMinute}`;
}

function parseShapes(
  declaration: RouteDeclaration,
  request: Request,
  params: unknown,
): Result<{ params: unknown; query: unknown }, PathMessage[]> {
  const parsedParams = parseWith(declaration.params, params ?? {});
  if (!parsedParams.ok) return parsedParams;
  const parsedQuery = parseWith(declaration.query, queryObject(new URL(request.url).searchParams));
  if (!parsedQuery.ok) return parsedQuery;
  return ok({ params: parsedParams.value, query: parsedQuery.value });
}

/** Query as an object without a prototype; a name that comes twice is a list. */
function queryObject(search: URLSearchParams): Record<string, string | string[]> {
  const query = Object.create(null) as Record<string, string | string[]>;
  for (const name of new Set(search.keys())) {
    const values = search.getAll(name);
    query[name] = values.length === 1 ? (values[0] ?? "") : values;
  }
  return { ...query };
}

async function readBody(
  declaration: RouteDeclaration,
  request: Request,
): Promise<Result<{ parsed: unknown; bytes: Uint8Array }, Response>> {
  if (declaration.body === undefined && declaration.rawBody === undefined) {
    return ok({ parsed: undefined, bytes: new Uint8Array() });
  }
  const types = declaration.rawBody ?? ["application/json"];
  if (!hasContentType(request, types)) {
    return fail(problem(415, { detail: `Send ${types.join(" or ")}.`, headers: { "accept-post": types.join(", ") } }));
  }
  const maxBytes = declaration.limit?.bodyBytes ?? defaultBodyBytes;
  const bytes = await readBytes(request, maxBytes);
  if (!bytes.ok) return fail(problem(413, { detail: `At most ${maxBytes} bytes are read.` }));
  if (declaration.body === undefined) return ok({ parsed: bytes.value, bytes: bytes.value });
  const json = parseJson(bytes.value);
  if (!json.ok) return fail(problem(400, { errors: [{ path: "", message: json.error }] }));
  const parsed = parseWith(declaration.body, json.value);
  if (!parsed.ok) return fail(problem(400, { errors: parsed.error }));
  return ok({ parsed: parsed.value, bytes: bytes.value });
}

/** The most complaints that one answer lists. */
const maxErrors = 100;

function parseWith(schema: ZodType | undefined, value: unknown): Result<unknown, PathMessage[]> {
  if (schema === undefined) return ok(undefined);
  const result = schema.safeParse(value);
  if (result.success) return ok(result.data);
  const issues = result.error.issues.flatMap((issue) => meantIssues(issue, []));
  return fail(issues.slice(0, maxErrors).map(({ path, message }) => ({ path: pathText(path), message })));
}

type Issue = z.core.$ZodIssue;
type Complaint = { readonly path: readonly PropertyKey[]; readonly message: string };

/**
 * Of a value with several shapes, the complaints of the shape that was meant: the one that gets farthest into it, or
 * that has least against it. Recursion ends with the schema's own depth.
 */
function meantIssues(issue: Issue, before: readonly PropertyKey[]): Complaint[] {
  const path = [...before, ...issue.path];
  if (issue.code !== "invalid_union" || issue.errors.length === 0) return [{ path, message: issue.message }];
  const shapes = issue.errors.map((errors) => errors.flatMap((inner) => meantIssues(inner, path)));
  const reach = (found: readonly Complaint[]) => Math.min(...found.map((one) => one.path.length));
  return shapes.reduce((best, found) => {
    const further = reach(found) - reach(best);
    return further > 0 || (further === 0 && found.length < best.length) ? found : best;
  });
}

/** `["slots", 2, "name"]` as `slots[2].name`. */
export function pathText(path: readonly PropertyKey[]): string {
  return path
    .map((part, at) => (typeof part === "number" ? `[${part}]` : at === 0 ? String(part) : `.${String(part)}`))
    .join("");
}
