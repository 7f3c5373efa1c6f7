import "server-only";
import { NextRequest } from "next/server";
import { handlers } from "@/auth";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";
import { sessionCookie } from "@/lib/server/session-token";

/** The authentication package answers with where to go next instead of a redirect when it is asked this way. */
const answerInJson = { "x-auth-return-redirect": "1" };

async function askAuth(request: Request, action: string, fields: Readonly<Record<string, string>>): Promise<Response> {
  const headers = new Headers({ ...answerInJson, "content-type": "application/x-www-form-urlencoded" });
  for (const name of ["host", "cookie", "user-agent", "x-forwarded-host", "x-forwarded-proto"]) {
    const value = request.headers.get(name);
    if (value !== null) headers.set(name, value);
  }
  const url = new URL(`/api/auth/${action}`, request.url);
  return handlers.POST(new NextRequest(url, { method: "POST", headers, body: new URLSearchParams(fields) }));
}

/** `Set-Cookie` lines of the session cookie alone: the package's helper cookies are for its own pages. */
function sessionCookies(response: Response): string[] {
  return response.headers.getSetCookie().filter((line) => line.startsWith(`${sessionCookie().name}=`));
}

/**
 * Signs in with address and password.
 * @returns the `Set-Cookie` lines that carry the new session. Error: "wrong-credentials", whichever of the two is wrong.
 */
export async function signInWithPassword(
  request: Request,
  given: { readonly email: string; readonly password: string },
): Promise<Result<readonly string[], "wrong-credentials">> {
  const response = await askAuth(request, "callback/credentials", given);
  const cookies = sessionCookies(response);
  if (cookies.length > 0) return ok(cookies);
  const next = ((await response.json()) as { url?: string }).url ?? "";
  if (next.includes("error=CredentialsSignin")) return fail("wrong-credentials");
  throw new Error(`signing in ended at ${new URL(next, request.url).search}`);
}

/** Ends the session of `request`. Returns the `Set-Cookie` lines that take its cookie away. */
export async function signOutOf(request: Request): Promise<readonly string[]> {
  return sessionCookies(await askAuth(request, "signout", {}));
}
