import { DrizzleAdapter } from "@auth/drizzle-adapter";
import { skipCSRFCheck } from "@auth/core";
import NextAuth, { CredentialsSignin } from "next-auth";
import type { NextAuthConfig } from "next-auth";
import type { Adapter } from "next-auth/adapters";
import Credentials from "next-auth/providers/credentials";
import { db } from "@/db/client";
import { findCredential } from "@/db/queries/accounts";
import { sessionDays, startSession } from "@/db/queries/sessions";
import { account, session, verification } from "@/db/schema/session";
import { user } from "@/db/schema/user";
import { signIn as signInShape } from "@/lib/contracts/account";
import { errorFacts } from "@/lib/server/error-facts";
import { takeAllowance } from "@/lib/server/limits";
import { log } from "@/lib/server/log";
import { verifyPassword } from "@/lib/server/password";
import { hashSessionToken, newSessionToken, sessionCookie } from "@/lib/server/session-token";

/** Attempts that one address may see in a minute, from wherever they come. */
const attemptsPerMinute = 20;

/** The package's adapter, but for tokens: the table knows only their hashes. */
function hashingAdapter(): Adapter {
  const plain = DrizzleAdapter(db, {
    usersTable: user,
    accountsTable: account,
    sessionsTable: session,
    verificationTokensTable: verification,
  });
  return {
    ...plain,
    getSessionAndUser: (token) => plain.getSessionAndUser?.(hashSessionToken(token)) ?? null,
    deleteSession: async (token) => {
      await plain.deleteSession?.(hashSessionToken(token));
    },
  };
}

async function authorise(given: unknown) {
  const parsed = signInShape.safeParse(given);
  if (!parsed.success) return null;
  const { email, password } = parsed.data;
  const allowance = await takeAllowance(db, `sign-in:${email}`, attemptsPerMinute);
  if (!allowance.allowed) return null;
  const found = await findCredential(db, email);
  const matches = await verifyPassword(found?.passwordHash ?? null, password);
  return found !== null && matches ? { id: found.userId, name: found.name, email: found.email } : null;
}

function config(request: Request | undefined): NextAuthConfig {
  const cookie = sessionCookie();
  return {
    adapter: hashingAdapter(),
    basePath: "/api/auth",
    trustHost: true,
    // Our routes check the origin of every unsafe request; the package's own token would be a second cookie.
    skipCSRFCheck,
    providers: [Credentials({ credentials: { email: {}, password: {} }, authorize: authorise })],
    cookies: {
      sessionToken: {
        name: cookie.name,
        options: { httpOnly: true, sameSite: "lax", path: "/", secure: cookie.secure },
      },
    },
    session: { maxAge: sessionDays * 86_400 },
    jwt: {
      // Signing in with a password makes the package encode a token. Ours is the key to a session row, so that
      // sessions can be listed and ended; `session.strategy` stays unset because "database" refuses passwords.
      encode: async ({ token }) => {
        if (token?.sub === undefined) throw new Error("a session needs a user");
        const value = newSessionToken();
        const userAgent = request?.headers.get("user-agent") ?? null;
        await startSession(db, { tokenHash: hashSessionToken(value), userId: token.sub, userAgent });
        return value;
      },
    },
    logger: {
      // A wrong password is no failure of ours. Anything else is, and the sign-in route answers it as one.
      error: (error) => {
        if (!(error instanceof CredentialsSignin)) log.error({ error: errorFacts(error) });
      },
    },
  };
}

export const { handlers } = NextAuth((request) => config(request));
