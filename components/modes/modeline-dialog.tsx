"use client";

import { useState } from "react";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { TextAreaField } from "@/components/ui/field";
import { ModeMark } from "@/components/video/mode-glyph";
import { useModesActs } from "@/components/modes/modes-context";
import { parseModeline } from "@/lib/timing/modeline/parse-modeline";

/** A modeline to paste: it is read with every key, what is wrong is named, and the page is filled from it. */
export function ModelineDialog({ open, onClose }: { readonly open: boolean; readonly onClose: () => void }) {
  const [text, setText] = useState("");
  const { takeRaster } = useModesActs();
  const read = text.trim() === "" ? null : parseModeline(text);
  const error =
    read === null || read.ok
      ? undefined
      : `${read.error.message}${read.error.at === undefined ? "" : ` It reads “${read.error.at}”.`}`;
  const use = () => {
    if (read?.ok !== true) return;
    takeRaster(read.value.timing);
    setText("");
    onClose();
  };
  return (
    <Dialog
      open={open}
      onOpenChange={(isOpen) => {
        if (!isOpen) onClose();
      }}
      title="Paste a modeline"
      description="As X.Org writes it: a clock in MHz, eight counts, flags. An interlaced one counts the lines of a frame."
      foot={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button kind="primary" disabled={read?.ok !== true} onClick={use}>
            Use this raster
          </Button>
        </>
      }
    >
      <TextAreaField
        label="Modeline"
        rows={4}
        spellCheck={false}
        autoComplete="off"
        className="figure"
        placeholder={'Modeline "240p60" 27.00 1440 1478 1602 1716 240 244 247 262 -HSync -VSync'}
        value={text}
        error={error}
        onChange={(event) => setText(event.target.value)}
      />
      {read?.ok === true ? (
        <div className="mt-3 border-t border-line pt-3">
          <ModeMark timing={read.value.timing} />
          {read.value.notes.map((note) => (
            <p key={note} className="mt-1 text-sm text-muted">
              {note}
            </p>
          ))}
        </div>
      ) : null}
    </Dialog>
  );
}
