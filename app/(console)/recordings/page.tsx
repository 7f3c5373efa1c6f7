import type { Metadata } from "next";
import { redirect } from "next/navigation";
import { RecordingsView } from "@/components/recordings/recordings-view";
import { signInPath } from "@/components/shell/navigation";
import { getSessionUser } from "@/lib/server/session";

export const metadata: Metadata = { title: "Recordings" };

export default async function RecordingsPage() {
  if ((await getSessionUser()) === null) redirect(signInPath("/recordings"));
  return <RecordingsView />;
}
