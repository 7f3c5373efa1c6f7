"use client";

import { Pin } from "lucide-react";
import Link from "next/link";
import { useState } from "react";
import { BackupCompare } from "@/components/backups/backup-compare";
import { causeWords, changedWords } from "@/components/backups/backup-words";
import { RenameBackup } from "@/components/backups/rename-backup";
import { useBackups, useDeleteBackup, usePinBackup, useUndeleteBackup } from "@/components/backups/use-backups";
import { Button, ButtonLink } from "@/components/ui/button";
import { DataTable } from "@/components/ui/data-table";
import type { DataColumn } from "@/components/ui/data-table";
import { EmptyState } from "@/components/ui/empty-state";
import { ChangedRing } from "@/components/ui/finding-icon";
import { formatMoment } from "@/components/ui/moments";
import { Menu } from "@/components/ui/popover";
import type { MenuItem } from "@/components/ui/popover";
import { ProblemMessage } from "@/components/ui/problem-message";
import { problemText } from "@/components/ui/problem-text";
import { useToast } from "@/components/ui/toast";
import { ModeMark } from "@/components/video/mode-glyph";
import type { BackupView } from "@/lib/contracts/backup";
import type { DeviceView } from "@/lib/contracts/device";

/** A device's backups by date, and what changed between two of them. */
export function BackupList({ device }: { readonly device: DeviceView }) {
  const backups = useBackups(device.id);
  const [renaming, setRenaming] = useState<BackupView | null>(null);
  const rows = backups.data?.pages.flatMap((page) => page.items) ?? [];
  const columns: readonly DataColumn<BackupView>[] = [
    {
      id: "taken",
      header: "Taken",
      sortBy: (row) => row.takenAt,
      cell: (row) => <span className="figure whitespace-nowrap">{formatMoment(new Date(row.takenAt))}</span>,
    },
    { id: "name", header: "Backup", phone: "head", sortBy: (row) => row.name, cell: (row) => <BackupName row={row} /> },
    {
      id: "cause",
      header: "Why",
      sortBy: (row) => row.cause,
      cell: (row) => <span className="text-muted">{causeWords[row.cause]}</span>,
    },
    {
      id: "out",
      header: "Put out",
      cell: (row) =>
        row.rasterOut === null ? <span className="text-muted">nothing</span> : <ModeMark timing={row.rasterOut} />,
    },
    {
      id: "slot",
      header: "Slot",
      align: "end",
      sortBy: (row) => row.activeSlot,
      cell: (row) => <span className="figure">{row.activeSlot}</span>,
    },
    {
      id: "changed",
      header: "Since the one before",
      sortBy: (row) => row.changedValues ?? -1,
      cell: (row) => <Changed row={row} />,
    },
    {
      id: "acts",
      header: "Acts",
      hideHeader: true,
      align: "end",
      cell: (row) => <BackupActs row={row} onRename={() => setRenaming(row)} />,
    },
  ];
  if (backups.error !== null)
    return (
      <ProblemMessage error={backups.error} act={<Button onClick={() => void backups.refetch()}>Try again</Button>} />
    );
  if (backups.isPending) return <p className="text-muted">Loading</p>;
  if (rows.length === 0) {
    return (
      <EmptyState title="No backups of this device" act={<ButtonLink href="/bench">Back up</ButtonLink>}>
        Connect it on the Bench and press Back up.
      </EmptyState>
    );
  }
  return (
    <>
      <DataTable
        caption={`Backups of ${device.name}`}
        columns={columns}
        rows={rows}
        rowKey={(row) => row.id}
        sorting={{ id: "taken", desc: true }}
        isMarked={(row) => row.knownGood}
      />
      {backups.hasNextPage ? (
        <Button className="mt-4" disabled={backups.isFetchingNextPage} onClick={() => void backups.fetchNextPage()}>
          Show older ones
        </Button>
      ) : null}
      {rows.length > 1 ? <BackupCompare rows={rows} knownGoodId={device.knownGoodBackupId} /> : null}
      {renaming === null ? null : (
        <RenameBackup key={renaming.id} backup={renaming} onClose={() => setRenaming(null)} />
      )}
    </>
  );
}

function BackupName({ row }: { readonly row: BackupView }) {
  return (
    <span className="inline-flex flex-wrap items-baseline gap-x-2">
      <Link href={`/backups/${row.id}`} className="font-strong hover:underline">
        {row.name}
      </Link>
      {row.knownGood ? (
        <span className="inline-flex items-center gap-1 text-sm text-ok">
          <Pin aria-hidden size={13} />
          known good
        </span>
      ) : null}
    </span>
  );
}

function Changed({ row }: { readonly row: BackupView }) {
  const isChanged = row.changedValues !== null && row.changedValues > 0;
  return (
    <span className={isChanged ? undefined : "text-muted"}>
      {isChanged ? <ChangedRing className="mr-1.5" /> : null}
      {changedWords(row.changedValues)}
    </span>
  );
}

function BackupActs({ row, onRename }: { readonly row: BackupView; readonly onRename: () => void }) {
  const toast = useToast();
  const pin = usePinBackup();
  const remove = useDeleteBackup();
  const undelete = useUndeleteBackup();
  const say = (error: unknown) => toast({ text: problemText(error).fact });
  // The row leaves with the backup, and callbacks of `mutate` with the row; promises stay.
  const onUndo = () => void undelete.mutateAsync(row.id).catch(say);
  const onDelete = () =>
    void remove.mutateAsync(row).then(() => toast({ text: `${row.name} was deleted.`, undo: { onUndo } }), say);
  const isHeld = row.plans > 0 || row.knownGood;
  const items: readonly MenuItem[] = [
    { kind: "link", label: "Look inside", href: `/backups/${row.id}` },
    { kind: "link", label: "Restore to a device", href: `/bench?restore=${row.id}` },
    { kind: "link", label: "Publish as a profile", href: `/library/publish?backup=${row.id}` },
    { kind: "rule" },
    {
      kind: "act",
      label: row.knownGood ? "No longer known good" : "Pin as known good",
      onAct: () =>
        pin.mutate(
          { backup: row, pinned: !row.knownGood },
          {
            onSuccess: () =>
              toast({
                text: row.knownGood ? `${row.name} is no longer known good.` : `${row.name} is known good now.`,
              }),
            onError: say,
          },
        ),
    },
    { kind: "act", label: "Rename", onAct: onRename },
    { kind: "rule" },
    {
      kind: "act",
      label: isHeld ? "Delete (a plan or the pin holds it)" : "Delete",
      tone: "halt",
      disabled: isHeld,
      onAct: onDelete,
    },
  ];
  return (
    <Menu
      trigger={
        <Button size="small" aria-label={`Acts on ${row.name}`}>
          More
        </Button>
      }
      items={items}
    />
  );
}
