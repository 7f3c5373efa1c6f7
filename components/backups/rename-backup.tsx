"use client";

import { useState } from "react";
import { useRenameBackup } from "@/components/backups/use-backups";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { TextField } from "@/components/ui/field";
import { ProblemMessage } from "@/components/ui/problem-message";
import type { BackupView } from "@/lib/contracts/backup";

/** Gives a backup another name. */
export function RenameBackup({ backup, onClose }: { readonly backup: BackupView; readonly onClose: () => void }) {
  const rename = useRenameBackup();
  const [name, setName] = useState(backup.name);
  const wanted = name.trim();
  return (
    <Dialog
      open
      onOpenChange={(open) => {
        if (!open) onClose();
      }}
      title="Rename backup"
      foot={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button kind="primary" type="submit" form="rename-backup" disabled={wanted === "" || rename.isPending}>
            Rename
          </Button>
        </>
      }
    >
      <form
        id="rename-backup"
        onSubmit={(event) => {
          event.preventDefault();
          if (wanted !== "") rename.mutate({ backup, name: wanted }, { onSuccess: onClose });
        }}
      >
        <TextField
          label="Name"
          maxLength={120}
          value={name}
          error={wanted === "" ? "Give the backup a name." : undefined}
          onChange={(event) => setName(event.target.value)}
        />
      </form>
      {rename.error === null ? null : <ProblemMessage error={rename.error} />}
    </Dialog>
  );
}
