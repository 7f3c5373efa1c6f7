import { expect, test } from "@/tests/e2e/fixtures";

test.describe("every answer", () => {
  test("of a page lets only its own scripts run and nobody frame it", async ({ request }) => {
    const first = await request.get("/");
    const headers = first.headers();
    const policy = headers["content-security-policy"] ?? "";
    const scripts = policy.split("; ").find((part) => part.startsWith("script-src ")) ?? "";
    expect(scripts).toMatch(/'nonce-[A-Za-z0-9+/=]{20,}'/);
    expect(scripts).not.toMatch(/unsafe-inline|unsafe-eval|https?:|\*/);
    expect(policy.split("; ")).toEqual(
      expect.arrayContaining(["connect-src 'self'", "frame-ancestors 'none'", "base-uri 'none'"]),
    );
    expect(headers).toMatchObject({
      "x-frame-options": "DENY",
      "x-content-type-options": "nosniff",
      "referrer-policy": "strict-origin-when-cross-origin",
    });
    expect(headers["permissions-policy"]).toContain("serial=(self)");
    expect(headers["permissions-policy"]).toContain("camera=()");
    expect(headers["x-powered-by"]).toBeUndefined();
    const second = await request.get("/");
    expect(second.headers()["content-security-policy"], "a nonce is used once").not.toBe(policy);
  });

  test("of a route has the request's id, in a problem too, and never the one that was sent", async ({ request }) => {
    const sent = "00000000-0000-4000-8000-000000000000";
    const answer = await request.get("/api/account", { headers: { "x-request-id": sent } });
    expect(answer.status()).toBe(401);
    expect(answer.headers()["content-type"]).toBe("application/problem+json");
    const id = answer.headers()["x-request-id"];
    expect(id).toMatch(/^[0-9a-f-]{36}$/);
    expect(id).not.toBe(sent);
    expect(await answer.json()).toMatchObject({ status: 401, title: "Sign in first", requestId: id });
  });

  test("of the health route says what works", async ({ request }) => {
    const answer = await request.get("/api/health");
    expect([answer.status(), await answer.json()]).toEqual([
      200,
      { status: "ok", database: "ok", mail: "not-configured", storage: "not-configured" },
    ]);
  });
});

test("a page that does not exist says so within the policy, for everyone", async ({ page, expectAccessible }) => {
  const answer = await page.goto("/no-such-page");
  expect(answer?.status()).toBe(404);
  await expect(page.getByRole("heading", { level: 1 })).toBeVisible();
  await expectAccessible(page);
});
