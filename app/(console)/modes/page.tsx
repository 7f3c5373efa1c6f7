import type { Metadata } from "next";
import { ModesView } from "@/components/modes/modes-view";

export const metadata: Metadata = { title: "Modes" };

/** Make a mode; the query is read by the page itself, which falls back and says so. */
export default async function Page({
  searchParams,
}: {
  readonly searchParams: Promise<Record<string, string | string[] | undefined>>;
}) {
  return <ModesView query={await searchParams} />;
}
