import { respond, json } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { createAccount, getAccount, renameAccount } from "@/db/queries/accounts";
import { accountChange, accountView, registration, registrationTaken } from "@/lib/contracts/account";
import { hashPassword } from "@/lib/server/password";

export const POST = withRoute(
  {
    role: "anyone",
    summary: "Register. The answer is the same whether or not the address had an account.",
    body: registration,
    response: registrationTaken,
    status: 202,
    limit: { bodyBytes: 4096, requestsPerMinute: 10, perAddress: true },
  },
  async ({ body: { name, email, password } }) => {
    await createAccount(db, { name, email, passwordHash: await hashPassword(password) });
    return json({ next: "sign-in" }, { status: 202 });
  },
);

export const GET = withRoute(
  { role: "owner", summary: "The signed-in person's account.", response: accountView },
  async ({ user }) => respond(await getAccount(db, user.id), { absent: 404 }),
);

export const PATCH = withRoute(
  { role: "owner", summary: "Change the name.", body: accountChange, response: accountView },
  async ({ user, body }) => respond(await renameAccount(db, user.id, body.name), { absent: 404 }),
);
