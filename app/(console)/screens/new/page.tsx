import type { Metadata } from "next";
import { redirect } from "next/navigation";
import { NewScreenView } from "@/components/screens/edit-screen";
import { signInPath } from "@/components/shell/navigation";
import { getSessionUser } from "@/lib/server/session";

export const metadata: Metadata = { title: "Add a screen" };

export default async function NewScreenPage({
  searchParams,
}: {
  readonly searchParams: Promise<{ from?: string | string[] }>;
}) {
  const { from } = await searchParams;
  const presetId = typeof from === "string" ? from : null;
  if ((await getSessionUser()) === null)
    redirect(signInPath(presetId === null ? "/screens/new" : `/screens/new?from=${encodeURIComponent(presetId)}`));
  return <NewScreenView presetId={presetId} />;
}
