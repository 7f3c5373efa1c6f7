import { NextResponse } from "next/server";
import type { NextRequest } from "next/server";

/** Pages and routes; the files of the build and of `public/` need neither nonce nor id. */
export const config = {
  matcher: [{ source: "/((?!_next/static|_next/image|.*\\.(?:ico|png|svg|webp|txt|xsd|woff2)$).*)" }],
};

/**
 * Gives each request an id and a nonce, and each answer the policy that only lets scripts with that nonce run.
 *
 * The nonce goes to the page in the request headers: Next puts it on its own scripts, the root layout on the rest.
 */
export function proxy(request: NextRequest): NextResponse {
  const nonce = btoa(crypto.randomUUID());
  const requestId = crypto.randomUUID();
  const policy = contentSecurityPolicy(nonce);
  const headers = new Headers(request.headers);
  // Set, not added: what a client sent under these names never counts.
  headers.set("x-nonce", nonce);
  headers.set("x-request-id", requestId);
  headers.set("content-security-policy", policy);
  const response = NextResponse.next({ request: { headers } });
  response.headers.set("content-security-policy", policy);
  response.headers.set("x-request-id", requestId);
  return response;
}

/**
 * No inline scripts, no `eval`, nothing from elsewhere, no frames. Source: W3C Content Security Policy Level 3.
 * React's style properties need `style-src-attr`; the development server compiles with `eval` and talks over a
 * WebSocket.
 */
function contentSecurityPolicy(nonce: string): string {
  const isDevelopment = process.env.NODE_ENV === "development";
  return [
    "default-src 'none'",
    `script-src 'nonce-${nonce}' 'strict-dynamic'${isDevelopment ? " 'unsafe-eval'" : ""}`,
    `style-src 'self' 'nonce-${nonce}'`,
    "style-src-attr 'unsafe-inline'",
    "img-src 'self' data: blob:",
    "font-src 'self'",
    `connect-src 'self'${isDevelopment ? " ws:" : ""}`,
    "worker-src 'self'",
    "manifest-src 'self'",
    "form-action 'self'",
    "base-uri 'none'",
    "object-src 'none'",
    "frame-ancestors 'none'",
  ].join("; ");
}
