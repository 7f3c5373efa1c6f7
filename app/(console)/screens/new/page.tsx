import type { Metadata } from "next";
import { redirect } from "next/navigation";
import { NewScreenView } from "@/components/screens/edit-screen";
import { signInPath } from "@/components/shell/navigation";
import { getSessionUser } from "@/lib/server/session";

export const metadata: Metadata = { title: "Add a screen" };

type Search = Promise<{ from?: string | string[]; edid?: string | string[] }>;

export default async function NewScreenPage({ searchParams }: { readonly searchParams: Search }) {
  const { from, edid } = await searchParams;
  const start = new URLSearchParams();
  if (typeof from === "string") start.set("from", from);
  if (typeof edid === "string") start.set("edid", edid);
  if ((await getSessionUser()) === null) redirect(signInPath(`/screens/new${start.size === 0 ? "" : `?${start}`}`));
  return <NewScreenView presetId={start.get("from")} edid={start.get("edid")} />;
}
