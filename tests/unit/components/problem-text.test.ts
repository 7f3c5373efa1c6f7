import { afterEach, describe, expect, it, vi } from "vitest";
import { z } from "zod";
import { ApiProblem, callApi } from "@/components/ui/api";
import { problemText } from "@/components/ui/problem-text";

const answer = (status: number, body: unknown, type = "application/problem+json") =>
  new Response(typeof body === "string" ? body : JSON.stringify(body), { status, headers: { "content-type": type } });

/** The network, which is no part of the page. */
function network(respond: () => Response | Promise<Response>) {
  const calls: { path: string; init: RequestInit }[] = [];
  vi.stubGlobal("fetch", async (path: string, init: RequestInit) => {
    calls.push({ path, init });
    return respond();
  });
  return calls;
}

afterEach(() => vi.unstubAllGlobals());

const caught = (act: Promise<unknown>) =>
  act.then(
    () => null,
    (error: unknown) => error,
  );

describe("calling a route", () => {
  // RFC 9457, section 3.1: type, title, status, detail; `errors` is an extension.
  it("hands an RFC 9457 problem on, with the paths that were wrong", async () => {
    network(() =>
      answer(422, {
        type: "about:blank",
        title: "Understood, but not acceptable",
        status: 422,
        errors: [{ path: "slots[0].name", message: "is too long" }],
      }),
    );
    const error = await caught(callApi("/api/profiles", { method: "POST", body: {} }));
    expect(error).toBeInstanceOf(ApiProblem);
    expect(problemText(error)).toMatchObject({
      fact: "Understood, but not acceptable.",
      errors: [{ path: "slots[0].name", message: "is too long" }],
    });
  });

  it("says what a stale change means and what to do", async () => {
    network(() => answer(412, { title: "Changed in the meantime", status: 412 }));
    expect(problemText(await caught(callApi("/api/screens/1", { method: "PATCH", body: {} })))).toMatchObject({
      fact: "This was changed in the meantime.",
      detail: "Load the page again to see the newer state.",
    });
  });

  it("names the request only where the server itself failed", async () => {
    network(() => answer(500, { title: "Something failed here", status: 500, requestId: "r-1" }));
    expect(problemText(await caught(callApi("/api/screens"))).requestId).toBe("r-1");
    network(() => answer(404, { title: "Not found", status: 404, requestId: "r-2" }));
    expect(problemText(await caught(callApi("/api/screens"))).requestId).toBeUndefined();
  });

  it("bears an answer that is no problem document, and no answer at all", async () => {
    network(() => answer(502, "<html>bad gateway</html>", "text/html"));
    expect(problemText(await caught(callApi("/api/screens"))).fact).toMatch(/does not know/u);
    network(() => Promise.reject(new TypeError("failed to fetch")));
    expect(problemText(await caught(callApi("/api/screens"))).fact).toBe("The server did not answer.");
  });

  it("sends a key with each write, so that a repeat changes nothing twice, and none with a read", async () => {
    const calls = network(() => answer(200, { id: "1" }, "application/json"));
    const shape = z.object({ id: z.string() });
    await callApi("/api/screens", { shape });
    await callApi("/api/screens", { method: "POST", body: {}, idempotencyKey: "k-1", shape });
    await callApi("/api/screens", { method: "POST", body: {}, ifMatch: '"3"', shape });
    const keys = calls.map(({ init }) => new Headers(init.headers).get("idempotency-key"));
    expect(keys[0]).toBeNull();
    expect(keys[1]).toBe("k-1");
    expect(keys[2]).toMatch(/^[0-9a-f-]{36}$/u);
    expect(new Headers(calls[2]?.init.headers).get("if-match")).toBe('"3"');
  });

  it("takes no answer whose shape is another", async () => {
    network(() => answer(200, { id: 1 }, "application/json"));
    expect(await caught(callApi("/api/screens", { shape: z.object({ id: z.string() }) }))).toBeInstanceOf(z.ZodError);
  });
});
