import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { BackupDetailView } from "@/components/backups/backup-detail-view";
import { signInPath } from "@/components/shell/navigation";
import { idSchema } from "@/lib/contracts/page";
import { getSessionUser } from "@/lib/server/session";

export const metadata: Metadata = { title: "Backup" };

export default async function BackupPage({ params }: { readonly params: Promise<{ id: string }> }) {
  const { id } = await params;
  if (!idSchema.safeParse(id).success) notFound();
  if ((await getSessionUser()) === null) redirect(signInPath(`/backups/${id}`));
  return <BackupDetailView id={id} />;
}
