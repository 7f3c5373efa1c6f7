"use client";

import { useMemo, useState } from "react";
import { commandRows, MAX_SHOWN } from "@/components/drivers/editor/live-view";
import type { CommandRow } from "@/components/drivers/editor/live-view";
import { CommandPart } from "@/components/drivers/editor/command-part";
import { classNames } from "@/components/ui/class-names";
import { TextField } from "@/components/ui/field";
import { formatCount } from "@/components/ui/figures";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";

/** The bytes that each command makes, and how a pasted reply is read. The last definition that compiled stays in sight. */
export function LiveViewPart({ driver }: { readonly driver: CompiledDriver | null }) {
  const [kept, setKept] = useState(driver);
  if (driver !== null && driver !== kept) setKept(driver);
  const [filter, setFilter] = useState("");
  const [chosenId, setChosenId] = useState<string | null>(null);
  const found = useMemo(() => (kept === null ? null : commandRows(kept, filter)), [kept, filter]);
  if (kept === null || found === null) return <p className="text-muted">The bytes stand here as soon as the definition compiles.</p>;
  const { rows, total } = found;
  const chosen = rows.find(({ id }) => id === chosenId) ?? rows[0];
  return (
    <>
      {driver === null ? <p role="status" className="mb-3 text-muted">The text does not compile now: these are the bytes of what compiled last.</p> : null}
      {chosen === undefined ? null : <CommandPart key={chosen.id} driver={kept} row={chosen} />}
      <TextField
        label="Find a command"
        placeholder="write offsetPx"
        value={filter}
        onChange={(event) => setFilter(event.target.value)}
        fieldClassName="mb-2 mt-6 max-w-[320px]"
        hint={total > MAX_SHOWN ? `${formatCount(total, "command", "commands")}, the first ${MAX_SHOWN} below` : formatCount(total, "command", "commands")}
      />
      <table className="w-full border-collapse">
        <caption className="sr-only">Commands and their bytes, with example values</caption>
        <thead>
          <tr className="border-b border-line text-left text-sm text-muted">
            <th scope="col" className="py-1 pr-4 font-[500]">Command</th>
            <th scope="col" className="py-1 font-[500]">Bytes as text, and in hex</th>
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <CommandLine key={row.id} row={row} isChosen={row.id === chosen?.id} onChoose={() => setChosenId(row.id)} />
          ))}
        </tbody>
      </table>
    </>
  );
}

function CommandLine({ row: { words, made }, isChosen, onChoose }: { readonly row: CommandRow; readonly isChosen: boolean; readonly onChoose: () => void }) {
  return (
    <tr className={classNames("border-b border-line align-top", isChosen && "bg-surface shadow-[inset_3px_0_0_var(--lamp)]")}>
      <th scope="row" className="py-1 pl-2 pr-4 text-left font-[450]">
        <button type="button" aria-pressed={isChosen} className="break-all text-left hover:underline" onClick={onChoose}>
          {words}
        </button>
      </th>
      <td className="figure py-1">
        {typeof made === "string" ? (
          <span className="text-muted">{made}</span>
        ) : (
          <>
            <span className="break-all">{made.text}</span>
            <span className="block break-words text-muted">{made.hex}</span>
          </>
        )}
      </td>
    </tr>
  );
}
