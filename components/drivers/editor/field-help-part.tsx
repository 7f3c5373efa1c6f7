"use client";

import { useState } from "react";
import { FIELD_HELP, helpFor } from "@/components/drivers/editor/field-help";
import { TextField } from "@/components/ui/field";
import { formatCount } from "@/components/ui/figures";

/** What the field at the caret means, and what all fields mean. */
export function FieldHelpPart({ path }: { readonly path: string }) {
  const [filter, setFilter] = useState("");
  const here = helpFor(path);
  const wanted = filter.trim().toLowerCase();
  const shown = FIELD_HELP.filter((help) => `${help.path} ${help.words}`.toLowerCase().includes(wanted));
  return (
    <>
      <div className="mb-4 border-l-3 border-signal pl-3" aria-live="polite">
        <p className="figure break-all text-muted">{path === "" ? "Put the caret into a field: it is explained here." : path}</p>
        {here === null ? null : <p className="mt-0.5">{here.words}</p>}
      </div>
      <TextField label="Find a field" value={filter} onChange={(event) => setFilter(event.target.value)} fieldClassName="mb-2 max-w-[320px]" hint={formatCount(shown.length, "field", "fields")} />
      <dl>
        {shown.map((help) => (
          <div key={help.path} className="grid gap-x-6 border-t border-line py-1 sm:grid-cols-[minmax(0,2fr)_minmax(0,3fr)]">
            <dt className="figure break-all">{help.path}</dt>
            <dd>{help.words}</dd>
          </div>
        ))}
      </dl>
    </>
  );
}
