import type { Metadata } from "next";
import { ScreensView } from "@/components/screens/screens-view";

export const metadata: Metadata = { title: "Screens" };

export default async function ScreensPage({
  searchParams,
}: {
  readonly searchParams: Promise<{ show?: string | string[] }>;
}) {
  const { show } = await searchParams;
  return <ScreensView shown={typeof show === "string" ? show : null} />;
}
