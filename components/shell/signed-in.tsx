"use client";

import { createContext, useContext } from "react";
import type { ReactNode } from "react";

export type SignedIn = { readonly id: string; readonly name: string; readonly role: "owner" | "maintainer" | "admin" };

const SignedInContext = createContext<SignedIn | null>(null);

/** Who the page was made for. */
export function SignedInProvider({ user, children }: { readonly user: SignedIn | null; readonly children: ReactNode }) {
  return <SignedInContext.Provider value={user}>{children}</SignedInContext.Provider>;
}

/** Who is signed in, or null. */
export function useSignedIn(): SignedIn | null {
  return useContext(SignedInContext);
}
