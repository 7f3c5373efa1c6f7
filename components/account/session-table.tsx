"use client";

import { browserName } from "@/components/account/browser-name";
import { useRevokeOthers, useRevokeSession, useSessions } from "@/components/account/use-account";
import { Button } from "@/components/ui/button";
import { DataTable } from "@/components/ui/data-table";
import type { DataColumn } from "@/components/ui/data-table";
import { formatCount } from "@/components/ui/figures";
import { formatMoment } from "@/components/ui/moments";
import { PartHead } from "@/components/ui/page-head";
import { ProblemMessage } from "@/components/ui/problem-message";
import { useToast } from "@/components/ui/toast";
import type { SessionView } from "@/lib/contracts/account";

/** Every browser that is signed in, each with a way out. */
export function SessionTable({ headId }: { readonly headId: string }) {
  const sessions = useSessions();
  const revoke = useRevokeSession();
  const revokeOthers = useRevokeOthers();
  const toast = useToast();
  const rows = sessions.data?.items ?? [];
  const others = rows.filter((row) => !row.current).length;
  const columns: readonly DataColumn<SessionView>[] = [
    {
      id: "browser",
      header: "Browser",
      phone: "head",
      sortBy: (row) => browserName(row.userAgent),
      cell: (row) => (
        <span className="font-strong">
          {browserName(row.userAgent)}
          {row.current ? <span className="font-normal text-muted">, this one</span> : null}
        </span>
      ),
    },
    {
      id: "since",
      header: "Signed in",
      sortBy: (row) => row.createdAt,
      cell: (row) => <span className="figure">{formatMoment(new Date(row.createdAt))}</span>,
    },
    {
      id: "seen",
      header: "Last seen",
      sortBy: (row) => row.lastSeenAt,
      cell: (row) => <span className="figure">{formatMoment(new Date(row.lastSeenAt))}</span>,
    },
    {
      id: "act",
      header: "Acts",
      hideHeader: true,
      align: "end",
      cell: (row) =>
        row.current ? null : (
          <Button
            size="small"
            disabled={revoke.isPending}
            aria-label={`Sign out ${browserName(row.userAgent)}`}
            onClick={() => revoke.mutate(row.id, { onSuccess: () => toast({ text: "Signed out there." }) })}
          >
            Sign out
          </Button>
        ),
    },
  ];
  return (
    <>
      <PartHead
        id={headId}
        title="Sessions"
        aside={
          others === 0 ? (
            "This is the only browser that is signed in."
          ) : (
            <Button
              size="small"
              disabled={revokeOthers.isPending}
              onClick={() =>
                revokeOthers.mutate(undefined, {
                  onSuccess: ({ revoked }) =>
                    toast({ text: `${formatCount(revoked, "other browser was", "other browsers were")} signed out.` }),
                })
              }
            >
              Sign out everywhere else
            </Button>
          )
        }
      />
      {sessions.error === null ? null : <ProblemMessage error={sessions.error} />}
      {revoke.error === null ? null : <ProblemMessage error={revoke.error} />}
      {revokeOthers.error === null ? null : <ProblemMessage error={revokeOthers.error} />}
      <DataTable
        caption="Browsers that are signed in"
        columns={columns}
        rows={rows}
        rowKey={(row) => row.id}
        sorting={{ id: "seen", desc: true }}
      />
    </>
  );
}
