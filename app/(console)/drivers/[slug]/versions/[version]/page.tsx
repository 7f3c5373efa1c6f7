import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { EditorPage } from "@/components/drivers/editor/editor-page";
import { signInPath } from "@/components/shell/navigation";
import { versionParams } from "@/lib/contracts/driver";
import { getSessionUser } from "@/lib/server/session";

export const metadata: Metadata = { title: "Edit a driver" };

export default async function DriverVersionPage({
  params,
}: {
  readonly params: Promise<{ slug: string; version: string }>;
}) {
  const parsed = versionParams.safeParse(await params);
  if (!parsed.success) notFound();
  const { slug, version } = parsed.data;
  const user = await getSessionUser();
  if (user === null) redirect(signInPath(`/drivers/${slug}/versions/${version}`));
  // Only maintainers change a driver; everybody reads it on its own page.
  if (user.role === "owner") redirect(`/drivers/${slug}?version=${version}`);
  return <EditorPage slug={slug} version={version} />;
}
