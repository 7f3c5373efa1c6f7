import type { Metadata } from "next";
import { redirect } from "next/navigation";
import { PublishView } from "@/components/library/publish-view";
import { signInPath } from "@/components/shell/navigation";
import { idSchema } from "@/lib/contracts/page";
import { getSessionUser } from "@/lib/server/session";

export const metadata: Metadata = { title: "Publish a backup" };

export default async function PublishPage({
  searchParams,
}: {
  readonly searchParams: Promise<{ backup?: string | string[] }>;
}) {
  const { backup } = await searchParams;
  const id = idSchema.safeParse(backup);
  const backupId = id.success ? id.data : null;
  if ((await getSessionUser()) === null)
    redirect(signInPath(backupId === null ? "/library/publish" : `/library/publish?backup=${backupId}`));
  return <PublishView backupId={backupId} />;
}
