"use client";

import { createContext, useContext, useEffect, useMemo, useState } from "react";
import type { ReactNode } from "react";

/** dark: no device; lit: connected; breathing: a trial runs; trouble: something needs the owner. */
export type LinkState = "dark" | "lit" | "breathing" | "trouble";

export type Link = {
  readonly state: LinkState;
  /** The state in words: "Lanternfield LF-8 connected". */
  readonly text: string;
};

export const NO_LINK: Link = { state: "dark", text: "No device connected" };

const LinkContext = createContext<Link>(NO_LINK);
const SetLinkContext = createContext<((link: Link) => void) | null>(null);

/** Holds the link state for the lamp in the header. */
export function LinkStateProvider({ children }: { readonly children: ReactNode }) {
  const [link, setLink] = useState<Link>(NO_LINK);
  return (
    <SetLinkContext.Provider value={setLink}>
      <LinkContext.Provider value={link}>{children}</LinkContext.Provider>
    </SetLinkContext.Provider>
  );
}

/** The link as it stands. */
export function useLink(): Link {
  return useContext(LinkContext);
}

/** Tells the lamp how the link stands; on leaving the page it goes dark. */
export function useProvideLink(state: LinkState, text: string): void {
  const setLink = useContext(SetLinkContext);
  if (setLink === null) throw new Error("useProvideLink stands outside LinkStateProvider");
  const link = useMemo<Link>(() => ({ state, text }), [state, text]);
  useEffect(() => setLink(link), [setLink, link]);
  useEffect(() => () => setLink(NO_LINK), [setLink]);
}
