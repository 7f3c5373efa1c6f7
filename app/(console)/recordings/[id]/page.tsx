import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { RecordingDetailView } from "@/components/recordings/recording-detail-view";
import { signInPath } from "@/components/shell/navigation";
import { driverVersionNumber } from "@/lib/contracts/driver";
import { idSchema } from "@/lib/contracts/page";
import { getSessionUser } from "@/lib/server/session";

export const metadata: Metadata = { title: "Recording" };

export default async function RecordingPage({
  params,
  searchParams,
}: {
  readonly params: Promise<{ id: string }>;
  readonly searchParams: Promise<{ version?: string | string[] }>;
}) {
  const { id } = await params;
  if (!idSchema.safeParse(id).success) notFound();
  if ((await getSessionUser()) === null) redirect(signInPath(`/recordings/${id}`));
  const version = driverVersionNumber.safeParse((await searchParams).version);
  return <RecordingDetailView id={id} version={version.success ? version.data : null} />;
}
