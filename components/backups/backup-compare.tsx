"use client";

import { useState } from "react";
import { useBackupComparison } from "@/components/backups/use-backups";
import { ChangeTable } from "@/components/library/change-table";
import type { Change } from "@/components/library/change-table";
import { SelectField } from "@/components/ui/field";
import { formatCount } from "@/components/ui/figures";
import { formatMoment } from "@/components/ui/moments";
import { PartHead } from "@/components/ui/page-head";
import { ProblemMessage } from "@/components/ui/problem-message";
import type { BackupComparison, BackupView } from "@/lib/contracts/backup";

/** Neutral values first, then the settings that only this make of device has. */
function allChanges(comparison: BackupComparison): readonly Change[] {
  return [...comparison.changes, ...comparison.native.map(({ key, left, right }) => ({ path: key, left, right }))];
}

/** What changed between two backups of a device: at first from the known good one, or the one before, to the last. */
export function BackupCompare({
  rows,
  knownGoodId,
}: {
  readonly rows: readonly BackupView[];
  readonly knownGoodId: string | null;
}) {
  const last = rows[0];
  const before = rows.find((row) => row.id === knownGoodId && row.id !== last?.id) ?? rows[1];
  const [leftId, setLeft] = useState(before?.id ?? null);
  const [rightId, setRight] = useState(last?.id ?? null);
  const comparison = useBackupComparison(leftId, rightId);
  const options = rows.map((row) => ({
    value: row.id,
    label: `${row.name}, ${formatMoment(new Date(row.takenAt))}${row.knownGood ? ", known good" : ""}`,
  }));
  const changes = comparison.data === undefined ? null : allChanges(comparison.data);
  return (
    <section aria-labelledby="compare-head" className="mt-9">
      <PartHead
        id="compare-head"
        title="What changed"
        aside={changes === null ? "" : formatCount(changes.length, "value", "values")}
      />
      <div className="grid max-w-3xl grid-cols-1 gap-4 sm:grid-cols-2">
        <SelectField
          label="From"
          options={options}
          value={leftId ?? ""}
          onChange={(event) => setLeft(event.target.value)}
        />
        <SelectField
          label="To"
          options={options}
          value={rightId ?? ""}
          onChange={(event) => setRight(event.target.value)}
        />
      </div>
      <div className="mt-3" aria-live="polite">
        {comparison.error === null ? null : <ProblemMessage error={comparison.error} />}
        {leftId === rightId ? (
          <p className="text-muted">This is one backup. Choose another to compare it with.</p>
        ) : changes === null ? (
          <p className="text-muted">{comparison.isPending ? "Loading" : ""}</p>
        ) : changes.length === 0 ? (
          <p className="text-muted">Both hold the same.</p>
        ) : (
          <ChangeTable
            caption="What changed between the two backups"
            leftName={comparison.data?.left.name ?? ""}
            rightName={comparison.data?.right.name ?? ""}
            changes={changes}
          />
        )}
      </div>
    </section>
  );
}
