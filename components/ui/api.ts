import { z } from "zod";

/** An RFC 9457 problem as the routes send it. */
export const problemSchema = z.object({
  type: z.string().default("about:blank"),
  title: z.string(),
  status: z.number(),
  detail: z.string().optional(),
  /** A stable word for the case, as "stale". */
  code: z.string().optional(),
  errors: z.array(z.object({ path: z.string(), message: z.string() })).optional(),
  requestId: z.string().optional(),
});
export type Problem = z.infer<typeof problemSchema>;

/** A request that was answered with a problem, or not answered at all (`status` 0). */
export class ApiProblem extends Error {
  constructor(readonly problem: Problem) {
    super(problem.detail ?? problem.title);
    this.name = "ApiProblem";
  }
}

/** Whether the server could not be reached, or could not answer: the same request may be answered later. */
export function isServerAway(error: unknown): boolean {
  return error instanceof ApiProblem && (error.problem.status === 0 || error.problem.status >= 500);
}

export type ApiRequest<T> = {
  readonly method?: "GET" | "POST" | "PUT" | "PATCH" | "DELETE";
  /** Sent as JSON. */
  readonly body?: unknown;
  /** A file that is the body, byte for byte. */
  readonly file?: Blob;
  /** The revision that a change rests on. */
  readonly ifMatch?: string;
  /** The same key for the same act, so that a repeat after a lost answer changes nothing twice. */
  readonly idempotencyKey?: string;
  readonly signal?: AbortSignal;
  /** Shape of the answer. Without one an answer without a body is expected. */
  readonly shape?: z.ZodType<T>;
};

async function readProblem(response: Response): Promise<Problem> {
  const text = await response.text();
  const parsed = problemSchema.safeParse(parseJson(text));
  if (parsed.success) return parsed.data;
  return {
    type: "about:blank",
    title: "The server gave an answer that Backporch does not know.",
    status: response.status,
  };
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text) as unknown;
  } catch (error) {
    // Not JSON is an expected answer of a proxy in between; anything else is a bug.
    if (error instanceof SyntaxError) return undefined;
    throw error;
  }
}

function headersOf(request: ApiRequest<unknown>): Headers {
  const headers = new Headers({ accept: "application/json" });
  if (request.body !== undefined) headers.set("content-type", "application/json");
  if (request.file !== undefined) headers.set("content-type", "application/octet-stream");
  if (request.ifMatch !== undefined) headers.set("if-match", request.ifMatch);
  const isWrite = request.method !== undefined && request.method !== "GET";
  if (isWrite) headers.set("idempotency-key", request.idempotencyKey ?? crypto.randomUUID());
  return headers;
}

/**
 * Calls one of the project's own routes.
 *
 * @param path beginning with /api/
 * @throws ApiProblem for every answer that is no success, and when there is no answer (`status` 0)
 */
export async function callApi<T = undefined>(path: string, request: ApiRequest<T> = {}): Promise<T> {
  const response = await send(path, request);
  if (!response.ok) throw new ApiProblem(await readProblem(response));
  // Without a shape nobody looks at the value, so `undefined` stands for it.
  if (request.shape === undefined) return undefined as T;
  return request.shape.parse(await response.json());
}

async function send(path: string, request: ApiRequest<unknown>): Promise<Response> {
  try {
    return await fetch(path, {
      method: request.method ?? "GET",
      headers: headersOf(request),
      body: request.file ?? (request.body === undefined ? undefined : JSON.stringify(request.body)),
      credentials: "same-origin",
      signal: request.signal,
    });
  } catch (error) {
    if (error instanceof DOMException && error.name === "AbortError") throw error;
    throw new ApiProblem({
      type: "about:blank",
      title: "The server did not answer.",
      status: 0,
      detail: "Check the connection, then try again.",
    });
  }
}
