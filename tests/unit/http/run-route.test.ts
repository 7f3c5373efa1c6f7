import { describe, expect, it } from "vitest";
import { z } from "zod";
import type { RouteDeclaration, SessionUser } from "@/app/api/_http/declaration";
import { runRoute } from "@/app/api/_http/pipeline";
import type { RouteHandler, RoutePorts } from "@/app/api/_http/pipeline";
import { json } from "@/app/api/_http/respond";

const owner: SessionUser = { id: "u1", role: "owner", name: "Owner", sessionId: "s1" };

/** Ports of a caller with plenty of allowance and no keys stored. */
function portsFor(user: SessionUser | null, over: Partial<RoutePorts> = {}): RoutePorts {
  return {
    sessionUser: async () => user,
    takeAllowance: async () => ({ allowed: true }),
    claimKey: async () => ({ kind: "first" }),
    settleKey: async () => undefined,
    releaseKey: async () => undefined,
    ...over,
  };
}

type Asked = {
  readonly declaration: RouteDeclaration;
  readonly request: Request;
  readonly user?: SessionUser | null;
  readonly params?: Record<string, string>;
  readonly ports?: Partial<RoutePorts>;
  readonly handler?: RouteHandler<RouteDeclaration>;
};

async function ask({ declaration, request, user = null, params = {}, ports = {}, handler }: Asked): Promise<Response> {
  const outcome = await runRoute(portsFor(user, ports), {
    declaration,
    handler: handler ?? (({ params: path, query, body }) => json({ path, query, body })),
    request,
    requestId: "r",
    context: { params: Promise.resolve(params) },
  });
  return outcome.response;
}

const url = "http://127.0.0.1:3000/api/things";

function post(body: BodyInit, headers: Record<string, string> = {}): Request {
  return new Request(url, {
    method: "POST",
    body,
    headers: { host: "127.0.0.1:3000", "content-type": "application/json", ...headers },
  });
}

const open: RouteDeclaration = { role: "anyone", body: z.object({ slots: z.array(z.object({ name: z.string() })) }) };

describe("who may call", () => {
  it("refuses a route for owners without a session", async () => {
    const response = await ask({ declaration: { role: "owner" }, request: new Request(url) });
    expect(response.status).toBe(401);
    // RFC 9110, section 15.5.2: a 401 must carry WWW-Authenticate.
    expect(response.headers.get("www-authenticate")).toContain("Session");
  });

  it("refuses a lower role and takes a higher one", async () => {
    const declaration: RouteDeclaration = { role: "maintainer" };
    expect((await ask({ declaration, request: new Request(url), user: owner })).status).toBe(403);
    const admin: SessionUser = { ...owner, role: "admin" };
    expect((await ask({ declaration, request: new Request(url), user: admin })).status).toBe(200);
  });

  it.each([
    ["another site's origin", { origin: "https://elsewhere.example" }],
    ["an opaque origin", { origin: "null" }],
    ["another port", { origin: "http://127.0.0.1:3001" }],
    ["a cross-site fetch without an origin", { "sec-fetch-site": "cross-site" }],
    ["a same-site fetch without an origin", { "sec-fetch-site": "same-site" }],
  ])("refuses a write from %s before anything else", async (_, headers: Record<string, string>) => {
    const response = await ask({ declaration: open, request: post('{"slots":[]}', headers), user: owner });
    expect(response.status).toBe(403);
    expect(await response.json()).toMatchObject({ code: "foreign-origin" });
  });

  it("takes a write from its own pages and from programs that are no browser", async () => {
    const own = post('{"slots":[]}', { origin: "http://127.0.0.1:3000", "sec-fetch-site": "same-origin" });
    expect((await ask({ declaration: open, request: own })).status).toBe(200);
    expect((await ask({ declaration: open, request: post('{"slots":[]}') })).status).toBe(200);
  });

  it("answers 429 with Retry-After when the allowance is used up, before reading the body", async () => {
    const request = post("not json");
    const ports = { takeAllowance: async () => ({ allowed: false as const, retryAfterS: 7 }) };
    const response = await ask({ declaration: open, request, ports });
    expect([response.status, response.headers.get("retry-after")]).toEqual([429, "7"]);
    expect(request.bodyUsed).toBe(false);
  });
});

describe("what a route takes", () => {
  it("hands parsed path, query and body to the handler", async () => {
    const declaration: RouteDeclaration = {
      role: "anyone",
      params: z.object({ id: z.string() }),
      query: z.object({ limit: z.coerce.number() }),
      body: z.object({ n: z.number() }),
    };
    const request = new Request(`${url}?limit=5`, post('{"n":1}'));
    const response = await ask({ declaration, request, params: { id: "a" } });
    expect(await response.json()).toEqual({ path: { id: "a" }, query: { limit: 5 }, body: { n: 1 } });
  });

  it("names the place of each complaint", async () => {
    const response = await ask({ declaration: open, request: post('{"slots":[{"name":"a"},{}]}') });
    expect(response.status).toBe(400);
    expect(response.headers.get("content-type")).toBe("application/problem+json");
    expect(await response.json()).toMatchObject({ status: 400, errors: [{ path: "slots[1].name" }] });
  });

  it.each([
    ["malformed JSON", "{", 400],
    ["an empty body", "", 400],
    ["bytes that are no UTF-8", new Uint8Array([0x22, 0xff, 0x22]), 400],
    ["65 levels", "[".repeat(65) + "]".repeat(65), 400],
    ["a million open brackets", "[".repeat(200_000), 400],
  ])("refuses %s", async (_, body, status) => {
    expect((await ask({ declaration: open, request: post(body) })).status).toBe(status);
  });

  it("does not count brackets in strings as levels", async () => {
    const name = `\\"${"[".repeat(100)}`;
    expect((await ask({ declaration: open, request: post(`{"slots":[{"name":"${name}"}]}`) })).status).toBe(200);
  });

  it("refuses another content type", async () => {
    const response = await ask({ declaration: open, request: post("{}", { "content-type": "text/plain" }) });
    expect(response.status).toBe(415);
  });

  it("reads no further than its limit, whatever length is stated", async () => {
    const declaration: RouteDeclaration = { ...open, limit: { bodyBytes: 1000 } };
    let pulled = 0;
    const endless = new ReadableStream<Uint8Array>({
      pull(controller) {
        pulled += 1;
        controller.enqueue(new Uint8Array(600).fill(0x20));
      },
    });
    const init = { method: "POST", body: endless, duplex: "half", headers: { "content-type": "application/json" } };
    expect((await ask({ declaration, request: new Request(url, init) })).status).toBe(413);
    expect(pulled).toBeLessThan(5);
    const stated = post("x".repeat(1001));
    expect((await ask({ declaration, request: stated })).status).toBe(413);
  });

  it("hands raw bytes over where a route takes no JSON", async () => {
    const declaration: RouteDeclaration = { role: "anyone", rawBody: ["application/octet-stream"] };
    const request = post(new Uint8Array([1, 2, 3]), { "content-type": "application/octet-stream" });
    const handler: RouteHandler<RouteDeclaration> = ({ body }) => json([...(body as Uint8Array)]);
    expect(await (await ask({ declaration, request, handler })).json()).toEqual([1, 2, 3]);
  });
});
