/** A page of the console that the header leads to. Only pages that exist stand here. */
export type NavigationItem = { readonly href: string; readonly label: string };

export const navigation: readonly NavigationItem[] = [
  { href: "/bench", label: "Bench" },
  { href: "/backups", label: "Backups" },
  { href: "/library", label: "Library" },
  { href: "/screens", label: "Screens" },
  { href: "/modes", label: "Modes" },
  { href: "/drivers", label: "Drivers" },
];

/** The item that a path belongs to. */
export function currentItem(pathname: string): NavigationItem | undefined {
  return navigation.find(({ href }) => pathname === href || pathname.startsWith(`${href}/`));
}

/** What a return address may be: a path of this site, nothing that leads elsewhere. Everything else leads to the Bench. */
export function safeReturnPath(wanted: string | null | undefined): string {
  if (wanted === null || wanted === undefined) return "/bench";
  // "//host" and "/\host" are other sites to a browser.
  return /^\/(?![/\\])[^\p{Cc}\\]*$/u.test(wanted) ? wanted : "/bench";
}

/** Where to sign in, and come back from. */
export function signInPath(returnPath: string): string {
  return `/sign-in?from=${encodeURIComponent(returnPath)}`;
}
