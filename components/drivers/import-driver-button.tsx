"use client";

import { useRouter } from "next/navigation";
import { useRef, useState } from "react";
import { useImportDriver } from "@/components/drivers/use-drivers";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { ProblemMessage } from "@/components/ui/problem-message";
import { useToast } from "@/components/ui/toast";

/** Takes a .driver.json file as a new draft; a file that cannot be taken changes nothing. */
export function ImportDriverButton() {
  const router = useRouter();
  const toast = useToast();
  const input = useRef<HTMLInputElement>(null);
  const take = useImportDriver();
  const [fileName, setFileName] = useState("");
  const onFile = (file: File | undefined) => {
    if (file === undefined) return;
    setFileName(file.name);
    take.mutate(file, {
      onSuccess: ({ slug, version }) => {
        toast({ text: `${file.name} became the draft ${version}.` });
        router.push(`/drivers/${slug}/versions/${version}`);
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
        aria-label="Driver file"
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
