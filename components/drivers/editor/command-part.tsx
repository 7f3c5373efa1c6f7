"use client";

import { useId, useState } from "react";
import { frameWords, readPasted, valueProblem, withValue } from "@/components/drivers/editor/live-view";
import type { CommandRow } from "@/components/drivers/editor/live-view";
import { TextAreaField, TextField } from "@/components/ui/field";
import { formatCount } from "@/components/ui/figures";
import { Segmented } from "@/components/ui/segmented";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { commandBytes } from "@/lib/serial/driver/command-words";
import type { Command, CommandBytes } from "@/lib/serial/driver/command-words";

/** What stands for a command's value before one is typed. */
function exampleOf(command: Command): string | null {
  if (command.kind === "write") return String(command.value);
  return command.kind === "action" ? Object.values(command.fields).join(", ") : null;
}

/** One command: its bytes for a value, and what the driver makes of a reply that is pasted. */
export function CommandPart({ driver, row }: { readonly driver: CompiledDriver; readonly row: CommandRow }) {
  const headId = useId();
  const [typed, setTyped] = useState("");
  const example = exampleOf(row.command);
  const command = withValue(row.command, typed);
  const made = commandBytes(driver, command);
  return (
    <section aria-labelledby={headId}>
      <h2 id={headId} className="break-all text-lg">{row.words}</h2>
      {example === null ? null : (
        <TextField label="Native value" error={valueProblem(driver, command) ?? undefined} placeholder={example} value={typed} className="figure" fieldClassName="mt-2 max-w-[220px]" onChange={(event) => setTyped(event.target.value)} />
      )}
      {typeof made === "string" ? (
        <p role="status" className="mt-2">No bytes: {made}</p>
      ) : (
        <>
          <dl className="figure mt-2 grid grid-cols-[max-content_minmax(0,1fr)] gap-x-4">
            <dt className="text-muted">text</dt>
            <dd className="break-all">{made.text}</dd>
            <dt className="text-muted">hex</dt>
            <dd className="break-words">{made.hex}</dd>
          </dl>
          <p className="mt-1 text-sm text-muted">
            {formatCount(made.request.bytes.length, "byte", "bytes")}, an answer of {formatCount(made.replyBytes, "byte", "bytes")}
          </p>
          <Reply driver={driver} made={made} />
        </>
      )}
    </section>
  );
}

function Reply({ driver, made }: { readonly driver: CompiledDriver; readonly made: CommandBytes }) {
  const [as, setAs] = useState<"text" | "hex">(driver.definition.protocol.kind === "text" ? "text" : "hex");
  const [pasted, setPasted] = useState("");
  const read = pasted.trim() === "" ? null : readPasted(driver, made, pasted, as);
  return (
    <div className="mt-3">
      <Segmented
        label="The reply is pasted as"
        className="mb-2 max-w-[200px]"
        value={as}
        onChange={setAs}
        choices={[
          { value: "text", label: "Text" },
          { value: "hex", label: "Hex" },
        ]}
      />
      <TextAreaField label="A reply, to see how it is read" rows={2} spellCheck={false} className="figure" value={pasted} maxLength={8192} onChange={(event) => setPasted(event.target.value)} />
      <div aria-live="polite" className="mt-1.5">
        {typeof read === "string" ? <p>{read}</p> : null}
        {read !== null && typeof read !== "string" ? (
          <ul>
            {read.frames.length === 0 ? <li>No whole frame: more bytes are awaited.</li> : null}
            {read.frames.map((frame, index) => (
              <li key={index} className="border-t border-line py-1">
                {frameWords(frame)}
                <span className="figure block break-words text-muted">{frame.hex}</span>
              </li>
            ))}
            {Object.entries({ ...read.values, ...read.fields }).map(([name, value]) => (
              <li key={name} className="figure border-t border-line py-1">
                {name} = {String(value)}
              </li>
            ))}
          </ul>
        ) : null}
      </div>
    </div>
  );
}
