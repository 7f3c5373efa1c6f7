"use client";

import { NameForm } from "@/components/account/name-form";
import { PasswordForm } from "@/components/account/password-form";
import { SessionTable } from "@/components/account/session-table";
import { useAccount } from "@/components/account/use-account";
import { Button } from "@/components/ui/button";
import { formatDate } from "@/components/ui/moments";
import { PageHead, PartHead } from "@/components/ui/page-head";
import { ProblemMessage } from "@/components/ui/problem-message";

/** Name, password, sessions. */
export function AccountView() {
  const account = useAccount();
  if (account.isError) {
    return (
      <div className="gutter py-8">
        <ProblemMessage error={account.error} act={<Button onClick={() => void account.refetch()}>Try again</Button>} />
      </div>
    );
  }
  return (
    <div className="gutter pb-12 md:px-16">
      <PageHead
        title="Account"
        lead={
          account.data === undefined
            ? "Loading"
            : `${account.data.email}, ${account.data.role}, since ${formatDate(new Date(account.data.createdAt))}`
        }
      />
      <div className="grid grid-cols-1 gap-x-14 gap-y-8 border-t border-line pt-6 lg:grid-cols-2">
        <section aria-labelledby="name-head">
          <PartHead id="name-head" title="Name" />
          {account.data === undefined ? null : <NameForm name={account.data.name} />}
        </section>
        <section aria-labelledby="password-head">
          <PartHead id="password-head" title="Password" />
          <PasswordForm />
        </section>
      </div>
      <section aria-labelledby="sessions-head" className="mt-8 border-t border-line pt-6">
        <SessionTable headId="sessions-head" />
      </section>
    </div>
  );
}
