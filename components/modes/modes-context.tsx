"use client";

import { createContext, useContext, useEffect, useState, type ReactNode } from "react";
import { useStore } from "zustand";
import {
  createModesStore,
  type ModesActs,
  type ModesState,
  type ModesStore,
} from "@/components/modes/store/modes-store";
import { setAddress } from "@/components/ui/set-address";
import { fromQuery, toQuery, type ModesQuery } from "@/components/modes/store/link";

const ModesContext = createContext<ModesStore | null>(null);

/** Browsers refuse an address that changes with every key: it follows when the hand rests. */
const ADDRESS_FOLLOWS_MS = 250;

/** One page of Modes: its store, made from the address and never shared, and the address that follows it. */
export function ModesProvider({
  query,
  children,
}: {
  readonly query: ModesQuery;
  readonly children: (problems: readonly string[]) => ReactNode;
}) {
  const [{ page, problems }] = useState(() => {
    const read = fromQuery(query);
    return { page: createModesStore(read.choices), problems: read.problems };
  });
  const choices = useStore(page.store, (state) => state.choices);
  useEffect(() => {
    const timer = setTimeout(() => {
      const address = `${location.pathname}?${toQuery(choices)}`;
      if (address !== location.pathname + location.search) setAddress(address);
    }, ADDRESS_FOLLOWS_MS);
    return () => clearTimeout(timer);
  }, [choices]);
  return <ModesContext.Provider value={page}>{children(problems)}</ModesContext.Provider>;
}

function useModesStore(): ModesStore {
  const page = useContext(ModesContext);
  if (page === null) throw new Error("A part of Modes stands outside ModesProvider");
  return page;
}

/** A part of the page's state. */
export function useModes<T>(select: (state: ModesState) => T): T {
  return useStore(useModesStore().store, select);
}

/** Everything that can be done on the page, by the name of the act. */
export function useModesActs(): ModesActs {
  return useModesStore().acts;
}
