import "server-only";
import { createHash, randomBytes } from "node:crypto";

/** A token of 256 random bits, as the cookie carries it. */
export function newSessionToken(): string {
  return randomBytes(32).toString("base64url");
}

/** What the database keeps of a token: its SHA-256, in hex. A random token needs no salt. */
export function hashSessionToken(token: string): string {
  return createHash("sha256").update(token).digest("hex");
}

/** The session cookie. Over https it is bound to this host and to https (RFC 6265bis, section 4.1.3). */
export function sessionCookie(authUrl = process.env.AUTH_URL): { readonly name: string; readonly secure: boolean } {
  const secure = authUrl?.startsWith("https:") ?? false;
  return { name: secure ? "__Host-backporch.session" : "backporch.session", secure };
}

/** The value of the session cookie in a `Cookie` header, or null. */
export function readSessionCookie(header: string | null): string | null {
  const prefix = `${sessionCookie().name}=`;
  const pair = (header ?? "").split(";").find((part) => part.trim().startsWith(prefix));
  return pair === undefined ? null : pair.trim().slice(prefix.length);
}
