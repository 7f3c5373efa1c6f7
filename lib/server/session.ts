import "server-only";
import { headers } from "next/headers";
import { db } from "@/db/client";
import { findSessionUser } from "@/db/queries/sessions";
import type { SessionUser } from "@/db/queries/sessions";
import { hashSessionToken, readSessionCookie } from "@/lib/server/session-token";

/**
 * Who is signed in, or null.
 * @param request the route's request; pages leave it out and their own request is taken
 */
export async function getSessionUser(request?: Request): Promise<SessionUser | null> {
  const header = request === undefined ? (await headers()).get("cookie") : request.headers.get("cookie");
  const token = readSessionCookie(header);
  return token === null ? null : findSessionUser(db, hashSessionToken(token));
}
