"use client";

import { useId, useRef, useState } from "react";
import { useRouter } from "next/navigation";
import { nameOfFile, readChosen } from "@/components/recordings/chosen-file";
import type { ChosenFile } from "@/components/recordings/chosen-file";
import { useUploadRecording } from "@/components/recordings/use-recordings";
import { Button } from "@/components/ui/button";
import { Checkbox } from "@/components/ui/checkbox";
import { classNames } from "@/components/ui/class-names";
import { TextField } from "@/components/ui/field";
import { formatCount } from "@/components/ui/figures";
import { StopIcon } from "@/components/ui/finding-icon";
import { ProblemMessage } from "@/components/ui/problem-message";
import { useDroppedFile } from "@/components/ui/use-dropped-file";

/** Takes a recording as a file: read here first, so that each bad line is named before anything is sent. */
export function UploadForm() {
  const router = useRouter();
  const inputId = useId();
  const input = useRef<HTMLInputElement>(null);
  const upload = useUploadRecording();
  const [chosen, setChosen] = useState<ChosenFile | null>(null);
  const [name, setName] = useState("");
  const [strikeOut, setStrikeOut] = useState(true);
  const take = (file: File) =>
    void file.arrayBuffer().then((buffer) => {
      upload.reset();
      setChosen(readChosen(file.name, new Uint8Array(buffer)));
      setName(nameOfFile(file.name));
    });
  const isOver = useDroppedFile(take);
  const isReady = chosen?.read.ok === true && name.trim() !== "";
  const onUpload = () => {
    if (chosen === null || !isReady) return;
    // What was chosen stays until it is stored, so a lost answer loses nothing.
    upload.mutate(
      { file: new Blob([chosen.text]), name: name.trim(), strikeOut },
      { onSuccess: ({ id }) => router.push(`/recordings/${id}`) },
    );
  };
  return (
    <section aria-labelledby={`${inputId}-head`} className={classNames("self-start border border-dashed px-4 py-4", isOver ? "border-lamp bg-surface" : "border-edge")}>
      <h2 id={`${inputId}-head`} className="text-xl">Upload a recording</h2>
      <p className="mb-3 mt-1 text-muted">{isOver ? "Let go to read it." : "Drop a file anywhere on this page, or choose one."}</p>
      <label htmlFor={inputId} className="sr-only">Recording file</label>
      <input
        ref={input}
        id={inputId}
        type="file"
        accept=".jsonl,.ndjson,.json,.txt"
        tabIndex={-1}
        className="sr-only"
        onChange={(event) => {
          const file = event.target.files?.[0];
          // The same file can be chosen again after it was put right.
          event.target.value = "";
          if (file !== undefined) take(file);
        }}
      />
      <Button onClick={() => input.current?.click()}>Choose a file</Button>
      {chosen === null ? null : <Chosen chosen={chosen} />}
      {chosen?.read.ok === true ? (
        <div className="mt-3 flex flex-col items-start gap-3">
          <TextField label="Name" value={name} maxLength={120} fieldClassName="w-full" onChange={(event) => setName(event.target.value)} />
          <Checkbox
            label="Strike out names and serial numbers"
            hint="Before anything is stored; it cannot be undone in the stored copy."
            checked={strikeOut}
            onChange={setStrikeOut}
          />
          <Button kind="primary" disabled={!isReady || upload.isPending} onClick={onUpload}>
            Upload
          </Button>
        </div>
      ) : null}
      {upload.error === null ? null : <div className="mt-3"><ProblemMessage error={upload.error} /></div>}
    </section>
  );
}

function Chosen({ chosen: { fileName, read } }: { readonly chosen: ChosenFile }) {
  if (read.ok) {
    const { head, lines } = read.value;
    return (
      <p role="status" className="mt-3 border-t border-line pt-2">
        <span className="break-words font-strong">{fileName}</span>: {formatCount(lines.length, "line", "lines")}, made with
        driver <span className="figure">{head.driver.slug} {head.driver.version}</span>
        {head.struckOut ? "; names are struck out already" : ""}.
      </p>
    );
  }
  return (
    <div role="alert" className="mt-3 border-t border-line pt-2">
      <p className="flex items-start gap-2">
        <StopIcon className="mt-0.5" />
        <strong className="min-w-0 break-words text-halt">{fileName} is no recording that can be read.</strong>
      </p>
      <ul className="mt-1 max-h-56 overflow-y-auto" tabIndex={0} aria-label="What is wrong, by line">
        {read.error.map(({ path, message }) => (
          <li key={`${path} ${message}`} className="border-t border-line py-1 text-sm">
            {path === "" ? "" : <span className="figure mr-2 font-strong">line {path}</span>}
            {message}
          </li>
        ))}
      </ul>
    </div>
  );
}
