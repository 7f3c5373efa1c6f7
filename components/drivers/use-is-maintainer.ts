"use client";

import { useSignedIn } from "@/components/shell/signed-in";

/** Whether the signed-in person keeps drivers; the server decides again. */
export function useIsMaintainer(): boolean {
  const role = useSignedIn()?.role;
  return role === "maintainer" || role === "admin";
}
