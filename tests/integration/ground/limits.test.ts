import { sql } from "drizzle-orm";
import { describe, expect, it } from "vitest";
import { db } from "@/db/client";
import { rateLimit } from "@/db/schema/rate-limit";
import { takeAllowance } from "@/lib/server/limits";
import { inTransaction } from "@/tests/integration/helpers/transaction";

describe("the allowance of a caller", () => {
  it(
    "gives a minute's worth and then says how long to wait",
    inTransaction(async (tx) => {
      for (let taken = 0; taken < 6; taken += 1) expect(await takeAllowance(tx, "a", 6)).toEqual({ allowed: true });
      // Six a minute is one each 10 s; a transaction's clock stands still, so nothing has come back yet.
      expect(await takeAllowance(tx, "a", 6)).toEqual({ allowed: false, retryAfterS: 10 });
      expect(await takeAllowance(tx, "b", 6)).toEqual({ allowed: true });
    }),
  );

  it(
    "comes back one by one",
    inTransaction(async (tx) => {
      for (let taken = 0; taken < 6; taken += 1) await takeAllowance(tx, "a", 6);
      await tx.update(rateLimit).set({ refilledAt: sql`refilled_at - interval '10 seconds'` });
      expect(await takeAllowance(tx, "a", 6)).toEqual({ allowed: true });
      expect(await takeAllowance(tx, "a", 6)).toMatchObject({ allowed: false });
    }),
  );

  it("is never given twice to requests that come at once", async () => {
    const outcomes = await Promise.all(Array.from({ length: 30 }, () => takeAllowance(db, "crowd", 10)));
    expect(outcomes.filter((outcome) => outcome.allowed)).toHaveLength(10);
  });

  it(
    "forgets callers that have it whole again",
    inTransaction(async (tx) => {
      const past = sql`now() - interval '1 second'`;
      await tx.insert(rateLimit).values(["old-1", "old-2", "old-3"].map((key) => ({ key, refilledAt: past })));
      await takeAllowance(tx, "new", 60);
      await takeAllowance(tx, "new", 60);
      const left = await tx
        .select({ key: rateLimit.key })
        .from(rateLimit)
        .where(sql`key like 'old-%'`);
      expect(left).toEqual([]);
    }),
  );
});
