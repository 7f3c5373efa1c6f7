"use client";

import { createContext, useContext } from "react";
import type { ReactNode } from "react";
import { DemoNote } from "@/components/ui/page-head";

const DemoPeopleContext = createContext<readonly string[]>([]);

/** Knows which people are invented. */
export function DemoPeopleProvider({
  ids,
  children,
}: {
  readonly ids: readonly string[];
  readonly children: ReactNode;
}) {
  return <DemoPeopleContext.Provider value={ids}>{children}</DemoPeopleContext.Provider>;
}

/** Says that something is a demo where one of its owners is invented. */
export function DemoNoteFor({
  ownerIds,
  className,
}: {
  readonly ownerIds: readonly (string | undefined)[];
  readonly className?: string;
}) {
  const people = useContext(DemoPeopleContext);
  if (!ownerIds.some((id) => id !== undefined && people.includes(id))) return null;
  return (
    <div className={className}>
      <DemoNote />
    </div>
  );
}
