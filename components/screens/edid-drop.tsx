"use client";

import { useEffect, useId, useRef, useState } from "react";
import { edidOfBytes, MAX_EDID_BYTES } from "@/components/screens/edid-file";
import type { EdidView } from "@/components/screens/edid-file";
import { Button } from "@/components/ui/button";
import { classNames } from "@/components/ui/class-names";
import { StopIcon } from "@/components/ui/finding-icon";
import { formatCount } from "@/components/ui/figures";
import { fail } from "@/lib/result";
import type { Result } from "@/lib/result";

type Refusal = { readonly file: string; readonly message: string };

async function readFile(file: File): Promise<Result<EdidView, string>> {
  if (file.size > MAX_EDID_BYTES) {
    return fail(`It has ${formatCount(file.size, "byte", "bytes")}; no EDID is longer than 32 768.`);
  }
  try {
    return edidOfBytes(new Uint8Array(await file.arrayBuffer()));
  } catch {
    // A folder, or a file that went away between choosing and reading.
    return fail("The browser cannot read it.");
  }
}

/**
 * Files dropped anywhere on the page. A drop that nobody takes would make the browser leave the page for the file.
 *
 * @returns whether a file hangs over the page
 */
function useDroppedFile(onFile: (file: File) => void): boolean {
  const [isOver, setIsOver] = useState(false);
  const handler = useRef(onFile);
  useEffect(() => {
    handler.current = onFile;
  });
  useEffect(() => {
    const hasFiles = (event: DragEvent) => event.dataTransfer?.types.includes("Files") === true;
    const over = (event: DragEvent) => {
      if (!hasFiles(event)) return;
      event.preventDefault();
      setIsOver(true);
    };
    const leave = (event: DragEvent) => {
      if (event.relatedTarget === null) setIsOver(false);
    };
    const drop = (event: DragEvent) => {
      if (!hasFiles(event)) return;
      event.preventDefault();
      setIsOver(false);
      const file = event.dataTransfer?.files[0];
      if (file !== undefined) handler.current(file);
    };
    window.addEventListener("dragover", over);
    window.addEventListener("dragleave", leave);
    window.addEventListener("drop", drop);
    return () => {
      window.removeEventListener("dragover", over);
      window.removeEventListener("dragleave", leave);
      window.removeEventListener("drop", drop);
    };
  }, []);
  return isOver;
}

export type EdidDropProps = {
  readonly onEdid: (edid: EdidView) => void;
  readonly className?: string;
};

/** A place for an EDID file: dropped anywhere on the page, or chosen. What is no EDID changes nothing. */
export function EdidDrop({ onEdid, className }: EdidDropProps) {
  const [refusal, setRefusal] = useState<Refusal | null>(null);
  const input = useRef<HTMLInputElement>(null);
  const inputId = useId();
  const take = (file: File) =>
    void readFile(file).then((read) => {
      setRefusal(read.ok ? null : { file: file.name, message: read.error });
      if (read.ok) onEdid(read.value);
    });
  const isOver = useDroppedFile(take);
  return (
    <div
      className={classNames(
        "border border-dashed px-3.5 py-3",
        isOver ? "border-lamp bg-surface" : "border-edge",
        className,
      )}
    >
      <div className="flex flex-wrap items-center gap-x-4 gap-y-2">
        <p className="min-w-40 flex-1 text-sm">
          <label htmlFor={inputId} className="block text-base font-strong">
            From an EDID file
          </label>
          <span className="text-muted">{isOver ? "Let go to read it." : "Drop it anywhere on this page."}</span>
        </p>
        <Button size="small" onClick={() => input.current?.click()}>
          Choose a file
        </Button>
      </div>
      <input
        ref={input}
        id={inputId}
        type="file"
        tabIndex={-1}
        className="sr-only"
        onChange={(event) => {
          const file = event.target.files?.[0];
          // The same file can be chosen again after it was put right.
          event.target.value = "";
          if (file !== undefined) take(file);
        }}
      />
      {refusal === null ? null : (
        <p role="alert" className="mt-2 flex gap-2 border-t border-line pt-2 text-sm">
          <StopIcon className="mt-0.5" />
          <span className="min-w-0">
            <strong className="block break-words text-halt">{refusal.file} was not taken.</strong>
            {refusal.message}
          </span>
        </p>
      )}
    </div>
  );
}
