import type { Metadata } from "next";
import { redirect } from "next/navigation";
import { BackupsView } from "@/components/backups/backups-view";
import { signInPath } from "@/components/shell/navigation";
import { getSessionUser } from "@/lib/server/session";

export const metadata: Metadata = { title: "Backups" };

export default async function BackupsPage({
  searchParams,
}: {
  readonly searchParams: Promise<{ device?: string | string[] }>;
}) {
  const { device } = await searchParams;
  const shown = typeof device === "string" ? device : null;
  if ((await getSessionUser()) === null)
    redirect(signInPath(shown === null ? "/backups" : `/backups?device=${encodeURIComponent(shown)}`));
  return <BackupsView shown={shown} now={new Date().toISOString()} />;
}
