"use client";

import { useRouter } from "next/navigation";
import { useState } from "react";
import type { ListenLine } from "@/components/recordings/listen/listen-core";
import { heardText } from "@/components/recordings/listen/listened";
import { useUploadRecording } from "@/components/recordings/use-recordings";
import { Button } from "@/components/ui/button";
import { Checkbox } from "@/components/ui/checkbox";
import { TextField } from "@/components/ui/field";
import { ProblemMessage } from "@/components/ui/problem-message";
import { driverSlug } from "@/lib/contracts/driver";
import type { WireEntry } from "@/lib/serial/wire-log";

export type KeepPartProps = {
  readonly entries: readonly WireEntry[];
  readonly line: ListenLine | null;
  readonly slug: string;
  readonly onSlug: (slug: string) => void;
};

/** Stores what was heard as a recording. */
export function KeepPart({ entries, line, slug, onSlug }: KeepPartProps) {
  const router = useRouter();
  const upload = useUploadRecording();
  const [name, setName] = useState("Listened to a device");
  const [strikeOut, setStrikeOut] = useState(true);
  const hasDriver = line?.kind === "driver";
  const slugError = hasDriver || driverSlug.safeParse(slug).success ? undefined : "Small letters, digits and hyphens";
  const onStore = () =>
    upload.mutate(
      { file: new Blob([heardText(entries, line, { slug, strikeOut })]), name: name.trim(), strikeOut: false },
      { onSuccess: ({ id }) => router.push(`/recordings/${id}`) },
    );
  return (
    <div className="mt-6 flex flex-col items-start gap-3 border-t border-line pt-4">
      <h2 className="text-xl">Keep what was heard</h2>
      <TextField label="Name" value={name} maxLength={120} fieldClassName="w-full" onChange={(event) => setName(event.target.value)} />
      {hasDriver ? (
        <Checkbox label="Strike out names and serial numbers" checked={strikeOut} onChange={setStrikeOut} />
      ) : (
        <TextField label="What the device is to be called" value={slug} error={slugError} className="figure" fieldClassName="w-full" hint="Its driver will have this name. Nothing can be struck out: nobody knows where a name stands." onChange={(event) => onSlug(event.target.value)} />
      )}
      {upload.error === null ? null : <ProblemMessage error={upload.error} />}
      <Button kind="primary" disabled={name.trim() === "" || slugError !== undefined || upload.isPending} onClick={onStore}>Store the recording</Button>
    </div>
  );
}
