import { describe, expect, it } from "vitest";
import { clientAddress } from "@/app/api/_http/client-address";
import { readIfMatch } from "@/app/api/_http/etag";
import { pathText } from "@/app/api/_http/pipeline";
import { json, respond } from "@/app/api/_http/respond";
import { errorFacts } from "@/lib/server/error-facts";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";

describe("a result as a response", () => {
  it("is the value as JSON, or the problem for its code", async () => {
    const good: Result<{ n: number }, "stale"> = ok({ n: 1 });
    const stale: Result<{ n: number }, "stale"> = fail("stale");
    const created = respond(good, { stale: 412 }, ({ n }) => ({
      status: 201,
      headers: { location: `/api/things/${n}` },
    }));
    expect([created.status, created.headers.get("location"), await created.json()]).toEqual([
      201,
      "/api/things/1",
      { n: 1 },
    ]);
    const refused = respond(stale, { stale: 412 });
    expect(refused.status).toBe(412);
    // RFC 9457, section 3: the media type and the members type, title and status.
    expect(refused.headers.get("content-type")).toBe("application/problem+json");
    expect(await refused.json()).toEqual({
      type: "about:blank",
      title: "Changed in the meantime",
      status: 412,
      code: "stale",
    });
  });

  it("shows the detail and the complaints of an error that has them", async () => {
    const errors = [{ path: "slots[0]", message: "No mode has this key." }];
    const result: Result<never, { code: "invalid"; detail: string; errors: typeof errors }> = fail({
      code: "invalid",
      detail: "Nothing was stored.",
      errors,
    });
    expect(await respond(result, { invalid: 422 }).json()).toMatchObject({ detail: "Nothing was stored.", errors });
  });

  it("has no body at 204", async () => {
    expect(await json(undefined, { status: 204 }).text()).toBe("");
  });
});

describe("the address of a caller", () => {
  const from = (chain: string, hops: number) =>
    clientAddress(new Request("http://x/", { headers: { "x-forwarded-for": chain } }), hops);

  it.each([
    ["203.0.113.9", 0, "203.0.113.9"],
    ["a client's own claim, 203.0.113.9", 0, "203.0.113.9"],
    ["a client's own claim, 203.0.113.9, 10.0.0.1", 1, "203.0.113.9"],
    ["::ffff:203.0.113.9", 0, "203.0.113.9"],
    // RFC 5952 forms of one network: a caller who owns a /64 is one caller.
    ["2001:db8:1:2:3:4:5:6", 0, "2001:db8:1:2::/64"],
    ["2001:db8::1", 0, "2001:db8:0:0::/64"],
  ])("of %s behind %d proxies is %s", (chain, hops, address) => expect(from(chain, hops)).toBe(address));
});

describe("an If-Match", () => {
  const read = (value?: string) =>
    readIfMatch(new Request("http://x/", value === undefined ? {} : { headers: { "if-match": value } }));

  it("names one strong version, none, or is malformed", () => {
    expect(read()).toEqual(ok(null));
    expect(read("*")).toEqual(ok(null));
    expect(read('"7"')).toEqual(ok("7"));
    for (const bad of ["7", 'W/"7"', '"7", "8"', '"a b"']) expect(read(bad)).toEqual(fail("malformed"));
  });
});

describe("the place of a complaint", () => {
  it("is written as the document is read", () => {
    expect(pathText(["slots", 2, "placement", "widthPct"])).toBe("slots[2].placement.widthPct");
    expect(pathText([])).toBe("");
    expect(pathText([0, "x"])).toBe("[0].x");
  });
});

describe("a failure in the log", () => {
  it("holds no value that a query was given", () => {
    const database = Object.assign(new Error('duplicate key: (email)=("imke@example.org")'), {
      code: "23505",
      severity: "ERROR",
      constraint: "user_email_idx",
    });
    const failed = Object.assign(new Error("Failed query: insert … params: $argon2id$secret", { cause: database }), {
      query: "insert …",
    });
    const facts = errorFacts(failed);
    expect(JSON.stringify(facts)).not.toMatch(/argon2id|imke/);
    expect(facts.cause).toMatchObject({ code: "23505", constraint: "user_email_idx" });
    expect(facts.frames[0]).toMatch(/^at /);
  });

  it("says a bug's own words", () => {
    expect(errorFacts(new TypeError("x is undefined"))).toMatchObject({ name: "TypeError", message: "x is undefined" });
  });
});
