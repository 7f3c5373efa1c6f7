import type { ReactNode } from "react";
import { demoPeople } from "@/app/(console)/demo-people";
import { DemoPeopleProvider } from "@/components/shell/demo-people";
import { SiteFrame } from "@/components/shell/site-frame";
import { getSessionUser } from "@/lib/server/session";

export default async function Layout({ children }: { readonly children: ReactNode }) {
  const user = await getSessionUser();
  return (
    <SiteFrame user={user === null ? null : { id: user.id, name: user.name, role: user.role }} footer={false}>
      <DemoPeopleProvider ids={demoPeople}>{children}</DemoPeopleProvider>
    </SiteFrame>
  );
}
