import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { z } from "zod";
import { ProfileView } from "@/components/library/profile-view";
import { idSchema } from "@/lib/contracts/page";

export const metadata: Metadata = { title: "Profile" };

const searchSchema = z.object({
  revision: z.coerce.number().int().min(1).nullable().catch(null),
  screen: z.string().max(64).nullable().catch(null),
});

export default async function ProfilePage({
  params,
  searchParams,
}: {
  readonly params: Promise<{ id: string }>;
  readonly searchParams: Promise<Readonly<Record<string, string | string[] | undefined>>>;
}) {
  const { id } = await params;
  if (!idSchema.safeParse(id).success) notFound();
  const search = await searchParams;
  const { revision, screen } = searchSchema.parse({ revision: search.revision ?? null, screen: search.screen ?? null });
  return <ProfileView id={id} revision={revision} screen={screen} />;
}
