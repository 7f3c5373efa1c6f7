"use client";

import { useId, useRef, useState } from "react";
import { edidOfBytes, MAX_EDID_BYTES } from "@/components/screens/edid-file";
import type { EdidView } from "@/components/screens/edid-file";
import { Button } from "@/components/ui/button";
import { classNames } from "@/components/ui/class-names";
import { StopIcon } from "@/components/ui/finding-icon";
import { formatCount } from "@/components/ui/figures";
import { useDroppedFile } from "@/components/ui/use-dropped-file";
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
