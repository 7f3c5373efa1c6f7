import type { Metadata } from "next";
import { StandardsView } from "@/components/standards/standards-view";

export const metadata: Metadata = { title: "Standards" };

export default function StandardsPage() {
  return <StandardsView />;
}
