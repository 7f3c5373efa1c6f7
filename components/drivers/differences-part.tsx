"use client";

import { useState } from "react";
import { stateWords, valueWords } from "@/components/drivers/driver-words";
import { useVersionComparison } from "@/components/drivers/use-drivers";
import { DataTable } from "@/components/ui/data-table";
import type { DataColumn } from "@/components/ui/data-table";
import { SelectField } from "@/components/ui/field";
import { formatCount } from "@/components/ui/figures";
import { ProblemMessage } from "@/components/ui/problem-message";
import type { DriverVersionView, VersionComparison } from "@/lib/contracts/driver";

export type DifferencesProps = {
  readonly version: DriverVersionView;
  readonly rows: readonly DriverVersionView[];
  readonly against: string | null;
};

/** What differs from another version to this one, by path. */
export function DifferencesPart({ version, rows, against }: DifferencesProps) {
  const others = rows.filter((row) => row.version !== version.version);
  const below = rows[rows.findIndex((row) => row.version === version.version) + 1];
  const [base, setBase] = useState(
    () => others.find((row) => row.version === against)?.version ?? below?.version ?? others[0]?.version ?? null,
  );
  const comparison = useVersionComparison({ slug: version.slug, version: base ?? version.version }, version.version);
  if (base === null) return <p className="text-muted">There is no other version to compare with yet.</p>;
  const { data, error } = comparison;
  return (
    <>
      <SelectField
        label="Compared with"
        fieldClassName="mb-4 max-w-[260px]"
        value={base}
        onChange={(event) => setBase(event.target.value)}
        options={others.map((row) => ({ value: row.version, label: `${row.version}, ${stateWords[row.state]}` }))}
      />
      {error === null ? null : <ProblemMessage error={error} />}
      {comparison.isPending ? <p className="text-muted">Comparing</p> : null}
      {data === undefined ? null : (
        <>
          <p aria-live="polite" className="mb-2 text-muted">
            {data.changes.length === 0
              ? "Both say the same."
              : `${formatCount(data.changes.length, "difference", "differences")}${data.more ? ", and more that are not listed" : ""}.`}
          </p>
          {data.changes.length === 0 ? null : (
            <DataTable
              caption={`What differs from version ${data.left} to ${data.right}`}
              columns={columnsOf(data)}
              rows={data.changes}
              rowKey={({ path }) => path}
            />
          )}
        </>
      )}
    </>
  );
}

type Change = VersionComparison["changes"][number];

function columnsOf({ left, right }: VersionComparison): readonly DataColumn<Change>[] {
  const value = (of: (change: Change) => unknown) =>
    function ValueCell(change: Change) {
      return <span className="figure break-words">{valueWords(of(change))}</span>;
    };
  return [
    { id: "path", header: "Path", phone: "head", sortBy: ({ path }) => path, cell: ({ path }) => <code className="figure break-all">{path}</code> },
    { id: "left", header: left, cell: value((change) => change.left) },
    { id: "right", header: right, cell: value((change) => change.right) },
  ];
}
