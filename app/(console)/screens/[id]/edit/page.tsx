import type { Metadata } from "next";
import { redirect } from "next/navigation";
import { EditScreenView } from "@/components/screens/edit-screen";
import { signInPath } from "@/components/shell/navigation";
import { getSessionUser } from "@/lib/server/session";

export const metadata: Metadata = { title: "Edit a screen" };

export default async function EditScreenPage({ params }: { readonly params: Promise<{ id: string }> }) {
  const { id } = await params;
  if ((await getSessionUser()) === null) redirect(signInPath(`/screens/${id}/edit`));
  return <EditScreenView id={id} />;
}
