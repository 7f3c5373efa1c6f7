import { db } from "@/db/client";
import { startSession } from "@/db/queries/sessions";
import { user } from "@/db/schema/user";
import { hashSessionToken, newSessionToken, sessionCookie } from "@/lib/server/session-token";

export type Person = { readonly id: string; readonly name: string; readonly cookie: string };

let count = 0;

/** A signed-in person with a session row, as signing in makes one. */
export async function person(role: "owner" | "maintainer" | "admin" = "owner"): Promise<Person> {
  count += 1;
  const name = `Person ${count}`;
  const [made] = await db
    .insert(user)
    .values({ name, email: `person-${count}@example.org`, role })
    .returning({ id: user.id });
  if (made === undefined) throw new Error("no row");
  const token = newSessionToken();
  await startSession(db, { tokenHash: hashSessionToken(token), userId: made.id, userAgent: null });
  return { id: made.id, name, cookie: `${sessionCookie().name}=${token}` };
}
