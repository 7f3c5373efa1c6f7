import { sql } from "drizzle-orm";
import { describe, expect, it } from "vitest";
import { withIdempotency } from "@/app/api/_http/idempotency";
import { json } from "@/app/api/_http/respond";
import { db } from "@/db/client";
import type { Db } from "@/db/client";
import { claimKey, releaseKey, settleKey } from "@/db/queries/idempotency";
import { idempotencyKey } from "@/db/schema/idempotency-key";
import { inTransaction } from "@/tests/integration/helpers/transaction";

const storeOn = (on: Db) => ({
  claimKey: claimKey.bind(null, on),
  settleKey: settleKey.bind(null, on),
  releaseKey: releaseKey.bind(null, on),
});

function asked(key: string, body: string, caller = "u1") {
  const request = new Request("http://127.0.0.1/api/plans", { method: "POST", headers: { "idempotency-key": key } });
  return { request, caller, bodyBytes: new TextEncoder().encode(body) };
}

describe("a write under an Idempotency-Key", () => {
  it(
    "is done once and answered the same each time",
    inTransaction(async (tx) => {
      let done = 0;
      const act = async () => json({ n: (done += 1) }, { status: 201, headers: { location: "/api/plans/1" } });
      const first = await withIdempotency(storeOn(tx), asked("k", "a"), act);
      const second = await withIdempotency(storeOn(tx), asked("k", "a"), act);
      expect(done).toBe(1);
      expect([second.status, second.headers.get("location"), await second.json()]).toEqual([
        first.status,
        first.headers.get("location"),
        await first.json(),
      ]);
    }),
  );

  it(
    "refuses the key for another request, and keeps callers apart",
    inTransaction(async (tx) => {
      const act = async () => json({}, { status: 204 });
      await withIdempotency(storeOn(tx), asked("k", "a"), act);
      expect((await withIdempotency(storeOn(tx), asked("k", "b"), act)).status).toBe(422);
      expect((await withIdempotency(storeOn(tx), asked("k", "b", "u2"), act)).status).toBe(204);
    }),
  );

  it("runs once when two come at the same time", async () => {
    let done = 0;
    let open = () => {};
    const gate = new Promise<void>((resolve) => (open = resolve));
    const act = async () => {
      done += 1;
      await gate;
      return json({});
    };
    const both = [1, 2].map(() => withIdempotency(storeOn(db), asked("race", "a"), act));
    const early = await Promise.race(both);
    open();
    const statuses = (await Promise.all(both)).map((response) => response.status);
    expect([early.status, done, statuses.sort()]).toEqual([409, 1, [200, 409]]);
  });

  it(
    "may be made again after a failure of ours",
    inTransaction(async (tx) => {
      const broken = async () => Promise.reject(new Error("bug"));
      await expect(withIdempotency(storeOn(tx), asked("k", "a"), broken)).rejects.toThrow("bug");
      expect((await withIdempotency(storeOn(tx), asked("k", "a"), async () => json({}))).status).toBe(200);
    }),
  );

  it(
    "takes over a claim whose process died a minute ago",
    inTransaction(async (tx) => {
      await claimKey(tx, { caller: "u1", key: "k", requestHash: "h" });
      expect(await claimKey(tx, { caller: "u1", key: "k", requestHash: "h" })).toEqual({ kind: "busy" });
      await tx.update(idempotencyKey).set({ createdAt: sql`now() - interval '61 seconds'` });
      expect(await claimKey(tx, { caller: "u1", key: "k", requestHash: "h" })).toEqual({ kind: "first" });
    }),
  );
});
