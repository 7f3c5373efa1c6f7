"use client";

import { useRouter } from "next/navigation";
import { useState } from "react";
import { nextVersion } from "@/components/drivers/driver-words";
import { useNewVersion, useVersion } from "@/components/drivers/use-drivers";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { TextField } from "@/components/ui/field";
import { ProblemMessage } from "@/components/ui/problem-message";
import { driverVersionNumber } from "@/lib/contracts/driver";
import type { DriverVersionView } from "@/lib/contracts/driver";

export type NewDraftProps = { readonly version: DriverVersionView; readonly rows: readonly DriverVersionView[] };

/** Begins a draft that says what this version says, under a number of its own. */
export function NewDraftButton(props: NewDraftProps) {
  const [isOpen, setOpen] = useState(false);
  return (
    <>
      <Button onClick={() => setOpen(true)}>New draft from this</Button>
      {isOpen ? <NewDraft {...props} onClose={() => setOpen(false)} /> : null}
    </>
  );
}

function NewDraft({ version, rows, onClose }: NewDraftProps & { readonly onClose: () => void }) {
  const router = useRouter();
  const source = useVersion(version);
  const make = useNewVersion(version.slug);
  const [number, setNumber] = useState(() => nextVersion(rows[0]?.version ?? version.version));
  const isTaken = rows.some((row) => row.version === number);
  const error = !driverVersionNumber.safeParse(number).success
    ? "Three numbers with points, as 1.2.0"
    : isTaken
      ? "There is such a version already"
      : undefined;
  const onMake = () => {
    if (source.data === undefined || error !== undefined) return;
    // The head of a version says what the definition says; both are sent so that the server can compare them.
    const { definition } = source.data;
    make.mutate(
      {
        definition: { ...definition, slug: version.slug, version: number, maker: String(definition["maker"]), model: String(definition["model"]) },
        note: "",
      },
      { onSuccess: () => router.push(`/drivers/${version.slug}/versions/${number}`) },
    );
  };
  return (
    <Dialog
      open
      onOpenChange={(open) => {
        if (!open) onClose();
      }}
      title="New draft"
      description={`It begins with what version ${version.version} says. Owners see nothing of it until it is published.`}
      foot={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button kind="primary" disabled={error !== undefined || source.data === undefined || make.isPending} onClick={onMake}>
            New draft
          </Button>
        </>
      }
    >
      <TextField label="Version" value={number} error={error} className="figure" onChange={(event) => setNumber(event.target.value.trim())} />
      {source.error === null ? null : <ProblemMessage error={source.error} />}
      {make.error === null ? null : <ProblemMessage error={make.error} />}
    </Dialog>
  );
}
