import { problem } from "@/app/api/_http/problem";
import { json } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { findAccountByEmail } from "@/db/queries/accounts";
import { listSessions, revokeOtherSessions } from "@/db/queries/sessions";
import { accountView, sessionList, sessionsRevoked, signIn } from "@/lib/contracts/account";
import { signInWithPassword } from "@/lib/server/sign-in";

export const POST = withRoute(
  {
    role: "anyone",
    summary: "Sign in with address and password. The session comes in a cookie.",
    body: signIn,
    response: accountView,
    status: 201,
    limit: { bodyBytes: 4096, requestsPerMinute: 20, perAddress: true },
  },
  async ({ request, body }) => {
    const cookies = await signInWithPassword(request, body);
    if (!cookies.ok) {
      return problem(401, { code: cookies.error, detail: "Address or password is wrong." });
    }
    const response = json(await findAccountByEmail(db, body.email), { status: 201 });
    for (const line of cookies.value) response.headers.append("set-cookie", line);
    return response;
  },
);

export const GET = withRoute(
  { role: "owner", summary: "The signed-in person's sessions, last seen first.", response: sessionList },
  async ({ user }) => json({ items: await listSessions(db, user) }),
);

export const DELETE = withRoute(
  { role: "owner", summary: "Sign every other browser out.", response: sessionsRevoked },
  async ({ user }) => json({ revoked: await revokeOtherSessions(db, user) }),
);
