import { like, sql } from "drizzle-orm";
import { describe, expect, it } from "vitest";
import { GET as getAccount, PATCH as patchAccount, POST as register } from "@/app/api/account/route";
import { PUT as putPassword } from "@/app/api/account/password/route";
import { DELETE as revoke } from "@/app/api/sessions/[id]/route";
import { DELETE as signOut } from "@/app/api/sessions/current/route";
import { DELETE as revokeOthers, GET as listSessions, POST as signIn } from "@/app/api/sessions/route";
import { db } from "@/db/client";
import { rateLimit } from "@/db/schema/rate-limit";
import { bodyOf, call, cookieOf } from "@/tests/integration/routes/http";

const password = "a long enough phrase";
let addressCount = 0;

/** Each call comes from an address of its own, so that the limits of sign-in do not meet the other tests. */
function fromElsewhere(): Record<string, string> {
  addressCount += 1;
  return { "x-forwarded-for": `192.0.2.${addressCount}` };
}

async function registered(email: string): Promise<void> {
  const answer = await call(register, {
    method: "POST",
    body: { name: "Wenna T.", email, password },
    headers: fromElsewhere(),
  });
  expect(answer.status).toBe(202);
}

function signedIn(email: string, withPassword = password): Promise<Response> {
  return call(signIn, {
    method: "POST",
    path: "/api/sessions",
    body: { email, password: withPassword },
    headers: { ...fromElsewhere(), "user-agent": "Test browser 1" },
  });
}

describe("registering and signing in", () => {
  it("makes an account that its password signs in, and stores neither password nor token", async () => {
    await registered("Wenna@Example.org");
    const answer = await signedIn("wenna@example.org");
    expect(answer.status).toBe(201);
    expect(await bodyOf(answer.clone())).toMatchObject({ name: "Wenna T.", email: "wenna@example.org", role: "owner" });
    const [line] = answer.headers.getSetCookie();
    expect(line).toMatch(/HttpOnly/);
    expect(line).toMatch(/SameSite=Lax/);
    const token = cookieOf(answer).split("=")[1] ?? "";
    const { rows } = await db.execute<{ everything: string }>(sql`
      select (select string_agg(s::text, ' ') from session s) || (select string_agg(c::text, ' ') from credential c) as everything`);
    expect(rows[0]?.everything).not.toContain(token);
    expect(rows[0]?.everything).not.toContain(password);
    expect(rows[0]?.everything).toContain("$argon2id$v=19$m=19456,t=2,p=1$");
    expect((await call(getAccount, { cookie: cookieOf(answer) })).status).toBe(200);
  });

  it("answers alike whether or not an address has an account", async () => {
    await registered("one@example.org");
    const again = await call(register, {
      method: "POST",
      body: { name: "Somebody else", email: "one@example.org", password: "another long phrase" },
      headers: fromElsewhere(),
    });
    expect([again.status, await again.json()]).toEqual([202, { next: "sign-in" }]);
    const answers = [await signedIn("one@example.org", "another long phrase"), await signedIn("nobody@example.org")];
    const bodies = await Promise.all(
      answers.map(async (answer) => ({ ...(await bodyOf(answer)), requestId: undefined, status: answer.status })),
    );
    expect(bodies[0]).toEqual(bodies[1]);
    expect(bodies[0]).toMatchObject({ status: 401, code: "wrong-credentials" });
    expect((await signedIn("one@example.org")).status).toBe(201);
  });

  it("refuses a password of nine characters and an address that is none, and makes no account", async () => {
    for (const wrong of [
      { email: "short@example.org", password: "123456789" },
      { email: "no address", password },
    ]) {
      const answer = await call(register, { method: "POST", body: { name: "X", ...wrong }, headers: fromElsewhere() });
      expect(answer.status).toBe(400);
    }
    const { rows } = await db.execute(sql`select from "user" where email like 'short@%' or email like 'no %'`);
    expect(rows).toHaveLength(0);
  });

  it("stops guessing from one address, and says how long to wait", async () => {
    const headers = { "x-forwarded-for": "198.51.100.7" };
    const guess = () => {
      const body = { email: "guess@example.org", password };
      return call(signIn, { method: "POST", path: "/api/sessions", body, headers });
    };
    expect((await guess()).status).toBe(401);
    // As after twenty guesses at once: a slow machine would have some of its allowance back by the time it made them.
    await db
      .update(rateLimit)
      .set({ refilledAt: sql`now() + interval '1 minute'` })
      .where(like(rateLimit.key, "address:198.51.100.7:%"));
    const refused = await guess();
    expect(refused.status).toBe(429);
    // 20 a minute is one each 3 s.
    expect(refused.headers.get("retry-after")).toMatch(/^[1-3]$/);
  });
});

describe("sessions", () => {
  it("lists a person's sessions, ends one, ends the others, and ends its own by signing out", async () => {
    await registered("many@example.org");
    const [first, second, third] = [
      await signedIn("many@example.org"),
      await signedIn("many@example.org"),
      await signedIn("many@example.org"),
    ].map(cookieOf);
    const list = await bodyOf<{ items: { id: string; current: boolean; userAgent: string }[] }>(
      await call(listSessions, { cookie: first }),
    );
    expect(list.items).toHaveLength(3);
    expect(list.items.filter((item) => item.current)).toHaveLength(1);
    expect(list.items[0]?.userAgent).toBe("Test browser 1");

    const mine = await bodyOf<typeof list>(await call(listSessions, { cookie: second }));
    const id = mine.items.find((item) => item.current)?.id ?? "";
    expect((await call(revoke, { method: "DELETE", params: { id }, cookie: first })).status).toBe(204);
    expect((await call(getAccount, { cookie: second })).status).toBe(401);

    expect(await bodyOf(await call(revokeOthers, { method: "DELETE", cookie: first }))).toEqual({ revoked: 1 });
    expect((await call(getAccount, { cookie: third })).status).toBe(401);

    const out = await call(signOut, { method: "DELETE", cookie: first });
    expect(out.status).toBe(204);
    expect(out.headers.getSetCookie()[0]).toMatch(/Max-Age=0|Expires=Thu, 01 Jan 1970/);
    expect((await call(getAccount, { cookie: first })).status).toBe(401);
  });

  it("does not end another person's session", async () => {
    await registered("ann@example.org");
    await registered("ben@example.org");
    const [ann, ben] = [await signedIn("ann@example.org"), await signedIn("ben@example.org")].map(cookieOf);
    const list = await bodyOf<{ items: { id: string }[] }>(await call(listSessions, { cookie: ann }));
    const answer = await call(revoke, { method: "DELETE", params: { id: list.items[0]?.id ?? "" }, cookie: ben });
    expect(answer.status).toBe(404);
    expect((await call(getAccount, { cookie: ann })).status).toBe(200);
  });

  it("knows no session after it has expired", async () => {
    await registered("late@example.org");
    const cookie = cookieOf(await signedIn("late@example.org"));
    await db.execute(sql`
      update session set expires = now() where user_id = (select id from "user" where email = 'late@example.org')`);
    expect((await call(getAccount, { cookie })).status).toBe(401);
  });

  it("takes a new password only with the old one, and signs the other browsers out", async () => {
    await registered("new@example.org");
    const [here, there] = [await signedIn("new@example.org"), await signedIn("new@example.org")].map(cookieOf);
    const next = "quite another phrase";
    const wrong = await call(putPassword, { method: "PUT", cookie: here, body: { current: "not this one", next } });
    expect(wrong.status).toBe(422);
    expect((await call(getAccount, { cookie: there })).status).toBe(200);
    const changed = await call(putPassword, { method: "PUT", cookie: here, body: { current: password, next } });
    expect(await bodyOf(changed)).toEqual({ revoked: 1 });
    expect((await call(getAccount, { cookie: there })).status).toBe(401);
    expect((await signedIn("new@example.org")).status).toBe(401);
    expect((await signedIn("new@example.org", next)).status).toBe(201);
  });

  it("changes the name, trimmed", async () => {
    await registered("name@example.org");
    const cookie = cookieOf(await signedIn("name@example.org"));
    const answer = await call(patchAccount, { method: "PATCH", cookie, body: { name: "  Wenna Trelawny " } });
    expect(await bodyOf(answer)).toMatchObject({ name: "Wenna Trelawny" });
  });

  it("does nothing for a request that another site sent", async () => {
    await registered("csrf@example.org");
    const cookie = cookieOf(await signedIn("csrf@example.org"));
    const headers = { origin: "https://elsewhere.example" };
    const answer = await call(patchAccount, { method: "PATCH", cookie, headers, body: { name: "Mallory" } });
    expect(answer.status).toBe(403);
    expect(await bodyOf(await call(getAccount, { cookie }))).toMatchObject({ name: "Wenna T." });
  });
});
