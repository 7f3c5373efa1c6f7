import type { Metadata } from "next";
import { AttenuatorView } from "@/components/attenuator/attenuator-view";

export const metadata: Metadata = { title: "Attenuator" };

export default function AttenuatorPage() {
  return <AttenuatorView />;
}
