import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { DriverView } from "@/components/drivers/driver-view";
import { driverSlug, driverVersionNumber } from "@/lib/contracts/driver";

export const metadata: Metadata = { title: "Driver" };

type Search = Readonly<Record<string, string | string[] | undefined>>;

export default async function DriverPage({
  params,
  searchParams,
}: {
  readonly params: Promise<{ slug: string }>;
  readonly searchParams: Promise<Search>;
}) {
  const { slug } = await params;
  if (!driverSlug.safeParse(slug).success) notFound();
  const { version, from, part } = await searchParams;
  const asked = (text: unknown) => {
    const parsed = driverVersionNumber.safeParse(text);
    return parsed.success ? parsed.data : null;
  };
  return <DriverView slug={slug} shown={asked(version)} against={asked(from)} part={typeof part === "string" ? part : null} />;
}
