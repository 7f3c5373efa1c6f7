import type { Metadata } from "next";
import { redirect } from "next/navigation";
import { ListenView } from "@/components/recordings/listen/listen-view";
import { signInPath } from "@/components/shell/navigation";
import { getSessionUser } from "@/lib/server/session";

export const metadata: Metadata = { title: "Listen to a device" };

export default async function ListenPage() {
  const user = await getSessionUser();
  if (user === null) redirect(signInPath("/recordings/listen"));
  // To get to know a device is maintainers' work; an owner records on the Bench.
  if (user.role === "owner") redirect("/recordings");
  return <ListenView />;
}
