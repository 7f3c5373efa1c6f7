"use client";

import { useQueryClient } from "@tanstack/react-query";
import { ChevronDown } from "lucide-react";
import { useRouter } from "next/navigation";
import { callApi } from "@/components/ui/api";
import { ButtonLink } from "@/components/ui/button";
import { Menu } from "@/components/ui/popover";
import type { MenuItem } from "@/components/ui/popover";
import { useToast } from "@/components/ui/toast";
import { useSignedIn } from "@/components/shell/signed-in";

/** Ends the session, forgets what was loaded for the owner, and goes to the front page. */
export function useSignOut(): () => void {
  const toast = useToast();
  const client = useQueryClient();
  const router = useRouter();
  return () => {
    callApi("/api/sessions/current", { method: "DELETE" })
      .then(() => {
        client.clear();
        router.push("/");
        router.refresh();
      })
      .catch(() => toast({ text: "Signing out did not work; you are still signed in." }));
  };
}

export function accountItems(signOut: () => void): readonly MenuItem[] {
  return [
    { kind: "link", label: "Account", href: "/account" },
    { kind: "act", label: "Sign out", onAct: signOut },
  ];
}

/** The owner's name with its menu, or the way in. */
export function AccountMenu() {
  const user = useSignedIn();
  const signOut = useSignOut();
  if (user === null) return <ButtonLink href="/sign-in">Sign in</ButtonLink>;
  return (
    <Menu
      trigger={
        <button
          type="button"
          className="inline-flex min-h-9 max-w-48 items-center gap-1.5 rounded-control px-2 font-[500] hover:bg-sunk"
        >
          <span className="truncate">{user.name}</span>
          <ChevronDown aria-hidden size={15} className="shrink-0 text-muted" />
        </button>
      }
      items={accountItems(signOut)}
    />
  );
}
