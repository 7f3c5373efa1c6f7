import { problem } from "@/app/api/_http/problem";
import { json } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { changePassword, findPasswordHash } from "@/db/queries/accounts";
import { passwordChange, sessionsRevoked } from "@/lib/contracts/account";
import { hashPassword, verifyPassword } from "@/lib/server/password";

export const PUT = withRoute(
  {
    role: "owner",
    summary: "Change the password, and sign every other browser out.",
    body: passwordChange,
    response: sessionsRevoked,
    limit: { bodyBytes: 4096, requestsPerMinute: 10 },
  },
  async ({ user, body }) => {
    if (!(await verifyPassword(await findPasswordHash(db, user.id), body.current))) {
      return problem(422, {
        code: "wrong-password",
        errors: [{ path: "current", message: "This is not the password." }],
      });
    }
    const passwordHash = await hashPassword(body.next);
    return json({ revoked: await changePassword(db, { userId: user.id, sessionId: user.sessionId, passwordHash }) });
  },
);
