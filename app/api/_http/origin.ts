const safeMethods = new Set(["GET", "HEAD", "OPTIONS"]);

/** True for a method that may change something. */
export function isUnsafe(method: string): boolean {
  return !safeMethods.has(method);
}

/**
 * Whether a browser sent this from another site.
 *
 * Browsers put `Origin` on every unsafe cross-site request and `Sec-Fetch-Site` on all; a request with neither does
 * not come from a page, so it carries nobody's cookies but its own. Sources: Fetch standard, "append a request
 * Origin header"; W3C Fetch Metadata.
 */
export function isForeignOrigin(request: Request): boolean {
  const origin = request.headers.get("origin");
  if (origin !== null) return !ownHosts(request).includes(hostOf(origin));
  const site = request.headers.get("sec-fetch-site");
  return site !== null && site !== "same-origin" && site !== "none";
}

function ownHosts(request: Request): string[] {
  const host = request.headers.get("host") ?? new URL(request.url).host;
  const stated = process.env.AUTH_URL;
  return stated === undefined || stated === "" ? [host] : [host, hostOf(stated)];
}

/** Host with port; empty for an opaque origin ("null"), which equals no host. */
function hostOf(origin: string): string {
  return URL.canParse(origin) ? new URL(origin).host : "";
}
