import { createHash } from "node:crypto";
import { isUnsafe } from "@/app/api/_http/origin";
import { problem } from "@/app/api/_http/problem";
import type { KeyClaim, KeyedRequest, StoredResponse } from "@/db/queries/idempotency";

/** Where answers under a key are kept; `db/queries/idempotency.ts` in the product. */
export type IdempotencyStore = {
  readonly claimKey: (request: KeyedRequest) => Promise<KeyClaim>;
  readonly settleKey: (request: KeyedRequest, response: StoredResponse) => Promise<void>;
  readonly releaseKey: (request: KeyedRequest) => Promise<void>;
};

type Keyable = { readonly request: Request; readonly caller: string; readonly bodyBytes: Uint8Array };

const keyShape = /^[\x21-\x7e]{1,128}$/;
const keptHeaders = ["content-type", "location", "etag"];

/**
 * Runs `act` once for an `Idempotency-Key`: the same key with the same request gets the first answer again, with
 * another request 422, and while the first is at work 409.
 *
 * Answers of 500 and above and those that set a cookie are not kept: the request may be made again.
 * Source: draft-ietf-httpapi-idempotency-key-header-06, section 2.
 */
export async function withIdempotency(
  store: IdempotencyStore,
  { request, caller, bodyBytes }: Keyable,
  act: () => Promise<Response>,
): Promise<Response> {
  const key = request.headers.get("idempotency-key");
  if (key === null || !isUnsafe(request.method)) return act();
  if (!keyShape.test(key)) {
    const message = "An Idempotency-Key has 1 to 128 visible ASCII characters.";
    return problem(400, { errors: [{ path: "Idempotency-Key", message }] });
  }
  const keyed = { caller, key, requestHash: requestHash(request, bodyBytes) };
  const claim = await store.claimKey(keyed);
  if (claim.kind === "other") {
    return problem(422, { code: "key-reused", detail: "This Idempotency-Key was used for another request." });
  }
  if (claim.kind === "busy") {
    const detail = "The first request with this key is still at work.";
    return problem(409, { code: "key-busy", detail, headers: { "retry-after": "1" } });
  }
  if (claim.kind === "replay") return replay(claim.response);
  try {
    return await keep(store, keyed, await act());
  } catch (error) {
    await store.releaseKey(keyed);
    throw error;
  }
}

async function keep(store: IdempotencyStore, keyed: KeyedRequest, response: Response): Promise<Response> {
  if (response.status >= 500 || response.headers.has("set-cookie")) {
    await store.releaseKey(keyed);
    return response;
  }
  const headers = Object.fromEntries(
    keptHeaders.flatMap((name) => {
      const value = response.headers.get(name);
      return value === null ? [] : [[name, value]];
    }),
  );
  await store.settleKey(keyed, { status: response.status, headers, body: await response.clone().text() });
  return response;
}

function replay({ status, headers, body }: StoredResponse): Response {
  // A 204 may not have a body, not even an empty one (Fetch standard, "null body status").
  return new Response(body === "" ? null : body, { status, headers: { ...headers, "idempotency-replayed": "true" } });
}

function requestHash(request: Request, bodyBytes: Uint8Array): string {
  const { pathname, search } = new URL(request.url);
  return createHash("sha256").update(`${request.method} ${pathname}${search}\n`).update(bodyBytes).digest("hex");
}
