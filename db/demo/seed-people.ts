import { inArray } from "drizzle-orm";
import type { Db } from "@/db/client";
import { demoAccounts } from "@/db/demo/accounts";
import type { DemoPerson } from "@/db/demo/accounts";
import { demoId } from "@/db/demo/demo-id";
import { credential, user } from "@/db/schema/user";
import { hashPassword } from "@/lib/server/password";

/** The people of the demo who stand in this database, by the first part of their address. */
export type People = ReadonlyMap<DemoPerson, { readonly id: string; readonly name: string }>;

function personOf(email: string): DemoPerson {
  // The cast holds: the addresses of `demoAccounts` begin with these names.
  return email.split("@")[0] as DemoPerson;
}

/**
 * Makes the demo's accounts that are missing. An address that somebody else registered is left alone, and so is all
 * that the demo would give it; a demo account that was changed stays as it is.
 */
export async function seedPeople(db: Db): Promise<People> {
  for (const { name, email, password, role } of demoAccounts) {
    const [made] = await db
      .insert(user)
      .values({ id: demoId(email), name, email, role })
      .onConflictDoNothing()
      .returning({ id: user.id });
    if (made !== undefined)
      await db.insert(credential).values({ userId: made.id, passwordHash: await hashPassword(password) });
  }
  const ids = demoAccounts.map(({ email }) => demoId(email));
  const standing = await db
    .select({ id: user.id, name: user.name, email: user.email })
    .from(user)
    .where(inArray(user.id, ids));
  return new Map(standing.map(({ id, name, email }) => [personOf(email), { id, name }]));
}
