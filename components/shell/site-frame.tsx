import type { ReactNode } from "react";
import { SiteFooter } from "@/components/shell/site-footer";
import { SiteHeader } from "@/components/shell/site-header";
import { SignedInProvider } from "@/components/shell/signed-in";
import type { SignedIn } from "@/components/shell/signed-in";

export type SiteFrameProps = {
  readonly user: SignedIn | null;
  /** The console fills its pages itself; the others end in the footer. */
  readonly footer: boolean;
  readonly children: ReactNode;
};

/** Header, content, footer: what every page stands in. */
export function SiteFrame({ user, footer, children }: SiteFrameProps) {
  return (
    <SignedInProvider user={user}>
      <SiteHeader />
      <main id="main" tabIndex={-1} className="flex flex-1 flex-col outline-none">
        {children}
      </main>
      {footer ? <SiteFooter /> : null}
    </SignedInProvider>
  );
}
