import { sql } from "drizzle-orm";
import { expect, it } from "vitest";
import { db } from "@/db/client";
import { demoAccounts } from "@/db/demo/accounts";
import { seedDemo } from "@/db/demo/seed";
import { createAccount, findCredential } from "@/db/queries/accounts";
import { hashPassword, verifyPassword } from "@/lib/server/password";

it("gives nothing to somebody who registered one of the demo's addresses before", async () => {
  const [imke] = demoAccounts;
  await createAccount(db, {
    name: "Somebody real",
    email: imke.email,
    passwordHash: await hashPassword("my own long phrase"),
  });
  await seedDemo(db);
  const found = await findCredential(db, imke.email);
  expect(found?.name).toBe("Somebody real");
  expect(await verifyPassword(found?.passwordHash ?? null, imke.password)).toBe(false);
  const { rows } = await db.execute<{ things: number; people: number }>(sql`
    select (select count(*)::int from device where owner_id = ${found?.userId}) + (select count(*)::int from profile where owner_id = ${found?.userId}) as things,
      (select count(*)::int from "user") as people`);
  expect(rows[0]).toEqual({ things: 0, people: demoAccounts.length });
}, 300_000);
