"use client";

import { usePathname, useSearchParams } from "next/navigation";
import { useCallback, useEffect, useState } from "react";
import { setAddress } from "@/components/ui/set-address";

/** Time to finish a figure before the address says it; browsers also refuse an address that changes all the time. */
const TYPING_MS = 200;

/** `step` leaves a way back in the browser's history; without it the address changes in place. */
export type ChangeAddress<State> = (change: Partial<State>, how?: "step") => void;

/**
 * State that stands in the address, so that it can be kept and shared. It acts at once; the address follows.
 *
 * @param read the state of a query; what is missing or wrong in it has its default
 * @param write the query of a state; defaults are left out
 * Both must be the same functions on each render.
 */
export function useAddress<State extends object>(
  read: (query: URLSearchParams) => State,
  write: (state: State) => URLSearchParams,
): readonly [State, ChangeAddress<State>] {
  const params = useSearchParams();
  const pathname = usePathname();
  const [state, setState] = useState(() => read(new URLSearchParams(params)));
  const query = write(state).toString();
  const address = query === "" ? pathname : `${pathname}?${query}`;

  useEffect(() => {
    const follow = () => setState(read(new URLSearchParams(window.location.search)));
    window.addEventListener("popstate", follow);
    return () => window.removeEventListener("popstate", follow);
  }, [read]);

  useEffect(() => {
    if (address === `${window.location.pathname}${window.location.search}`) return undefined;
    const timer = setTimeout(() => setAddress(address), TYPING_MS);
    return () => clearTimeout(timer);
  }, [address]);

  const change = useCallback<ChangeAddress<State>>(
    (part, how) => {
      const next = { ...state, ...part };
      if (how === "step") {
        const stepQuery = write(next).toString();
        window.history.pushState(null, "", stepQuery === "" ? pathname : `${pathname}?${stepQuery}`);
      }
      setState(next);
    },
    [state, write, pathname],
  );
  return [state, change];
}
