import type { Metadata } from "next";
import { LibraryView } from "@/components/library/library-view";

export const metadata: Metadata = { title: "Library" };

type Search = Readonly<Record<string, string | string[] | undefined>>;

export default async function LibraryPage({ searchParams }: { readonly searchParams: Promise<Search> }) {
  const search = await searchParams;
  const text = (name: string) => (typeof search[name] === "string" ? search[name] : null);
  return (
    <LibraryView
      wish={{
        q: (text("q") ?? "").slice(0, 100),
        screen: text("screen"),
        mine: text("mine") === "true",
        fitting: text("fitting") === "true",
      }}
    />
  );
}
