import type { Metadata } from "next";
import { redirect } from "next/navigation";
import { AccountView } from "@/components/account/account-view";
import { signInPath } from "@/components/shell/navigation";
import { getSessionUser } from "@/lib/server/session";

export const metadata: Metadata = { title: "Account" };

export default async function AccountPage() {
  if ((await getSessionUser()) === null) redirect(signInPath("/account"));
  return <AccountView />;
}
