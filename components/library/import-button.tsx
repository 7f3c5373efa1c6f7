"use client";

import { useRouter } from "next/navigation";
import { useRef, useState } from "react";
import { useImport } from "@/components/library/use-profiles";
import { signInPath } from "@/components/shell/navigation";
import { useSignedIn } from "@/components/shell/signed-in";
import { Button, ButtonLink } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { ProblemMessage } from "@/components/ui/problem-message";
import { useToast } from "@/components/ui/toast";

/** Takes a .porch.json file; a file that cannot be taken changes nothing, and each complaint names its path. */
export function ImportButton() {
  const user = useSignedIn();
  const router = useRouter();
  const toast = useToast();
  const input = useRef<HTMLInputElement>(null);
  const take = useImport();
  const [fileName, setFileName] = useState("");
  if (user === null) return <ButtonLink href={signInPath("/library")}>Import a file</ButtonLink>;
  const onFile = (file: File | undefined) => {
    if (file === undefined) return;
    setFileName(file.name);
    take.mutate(file, {
      onSuccess: ({ profile, unknownFields }) => {
        const kept =
          unknownFields.length === 0
            ? ""
            : ` It has ${unknownFields.length} fields that this version does not know; they were kept.`;
        toast({ text: `${profile.title} was imported. Only you see it until you share it.${kept}` });
        router.push(`/library/${profile.id}`);
      },
    });
  };
  return (
    <>
      <Button disabled={take.isPending} onClick={() => input.current?.click()}>
        Import a file
      </Button>
      <input
        ref={input}
        type="file"
        accept=".json,application/json"
        aria-label="Profile file"
        className="hidden"
        onChange={(event) => {
          onFile(event.target.files?.[0]);
          event.target.value = "";
        }}
      />
      <Dialog
        open={take.error !== null}
        onOpenChange={(open) => {
          if (!open) take.reset();
        }}
        title="The file was not imported"
        description={`${fileName} changed nothing.`}
        foot={<Button onClick={() => take.reset()}>Close</Button>}
      >
        <ProblemMessage error={take.error} />
      </Dialog>
    </>
  );
}
