import type { Metadata } from "next";
import { ScreensView } from "@/components/screens/screens-view";

export const metadata: Metadata = { title: "Screens" };

export default async function ScreensPage({
  searchParams,
}: {
  readonly searchParams: Promise<{ show?: string | string[]; edid?: string | string[] }>;
}) {
  const { show, edid } = await searchParams;
  return <ScreensView shown={typeof show === "string" ? show : null} edid={typeof edid === "string" ? edid : null} />;
}
