"use client";

import Link from "next/link";
import { useMemo, useState } from "react";
import { ChangeTable } from "@/components/library/change-table";
import { useRevision, useRevisions } from "@/components/library/use-profiles";
import { SelectField } from "@/components/ui/field";
import { formatCount } from "@/components/ui/figures";
import { formatDate } from "@/components/ui/moments";
import { PartHead } from "@/components/ui/page-head";
import { ProblemMessage } from "@/components/ui/problem-message";
import type { RevisionView } from "@/lib/contracts/profile";
import { compareDocuments } from "@/lib/profile/compare";

export type RevisionPartProps = { readonly profileId: string; readonly current: number; readonly shown: number };

/** The revisions of a profile, and what two of them name differently. */
export function RevisionPart({ profileId, current, shown }: RevisionPartProps) {
  const revisions = useRevisions(profileId);
  const rows = revisions.data ?? [];
  return (
    <section aria-labelledby="revisions-head">
      <PartHead
        id="revisions-head"
        title="Revisions"
        aside={rows.length === 0 ? "" : formatCount(rows.length, "revision", "revisions")}
      />
      {revisions.error === null ? null : <ProblemMessage error={revisions.error} />}
      <ol className="border-t border-line">
        {rows.map((row) => (
          <RevisionRow
            key={row.id}
            row={row}
            profileId={profileId}
            isShown={row.number === shown}
            isCurrent={row.number === current}
          />
        ))}
      </ol>
      {rows.length > 1 ? <RevisionCompare key={shown} profileId={profileId} rows={rows} shown={shown} /> : null}
    </section>
  );
}

function RevisionRow({
  row,
  profileId,
  isShown,
  isCurrent,
}: {
  readonly row: RevisionView;
  readonly profileId: string;
  readonly isShown: boolean;
  readonly isCurrent: boolean;
}) {
  return (
    <li
      className={`grid grid-cols-[36px_1fr_auto] items-baseline gap-x-3 border-b border-line py-1.5 pl-2 ${isShown ? "bg-surface shadow-[inset_3px_0_0_var(--lamp)]" : ""}`}
    >
      <span className="figure">{row.number}</span>
      <span className="min-w-0">
        <Link
          href={isCurrent ? `/library/${profileId}` : `/library/${profileId}?revision=${row.number}`}
          aria-current={isShown ? "true" : undefined}
          scroll={false}
          className="hover:underline"
        >
          {row.note === "" ? `Revision ${row.number}` : row.note}
        </Link>
        <span className="ml-2 text-sm text-muted">{row.author?.name ?? ""}</span>
      </span>
      <span className="figure pr-2 text-muted">{formatDate(new Date(row.createdAt))}</span>
    </li>
  );
}

function RevisionCompare({
  profileId,
  rows,
  shown,
}: {
  readonly profileId: string;
  readonly rows: readonly RevisionView[];
  readonly shown: number;
}) {
  const before = rows.find((row) => row.number < shown) ?? rows.at(-1);
  const [left, setLeft] = useState(before?.number ?? shown);
  const [right, setRight] = useState(shown);
  const [leftRevision, rightRevision] = [useRevision(profileId, left), useRevision(profileId, right)];
  const changes = useMemo(
    () =>
      leftRevision.data === undefined || rightRevision.data === undefined
        ? null
        : compareDocuments(leftRevision.data.document, rightRevision.data.document),
    [leftRevision.data, rightRevision.data],
  );
  const options = rows.map((row) => ({
    value: String(row.number),
    label: `Revision ${row.number}${row.note === "" ? "" : `, ${row.note.slice(0, 60)}`}`,
  }));
  return (
    <div className="mt-6">
      <h3 className="mb-2 text-lg">Compare two revisions</h3>
      <div className="grid max-w-2xl grid-cols-1 gap-4 sm:grid-cols-2">
        <SelectField
          label="From"
          options={options}
          value={String(left)}
          onChange={(event) => setLeft(Number(event.target.value))}
        />
        <SelectField
          label="To"
          options={options}
          value={String(right)}
          onChange={(event) => setRight(Number(event.target.value))}
        />
      </div>
      <div className="mt-3" aria-live="polite">
        {leftRevision.error === null ? null : <ProblemMessage error={leftRevision.error} />}
        {changes === null ? (
          <p className="text-muted">Loading</p>
        ) : changes.length === 0 ? (
          <p className="text-muted">They name the same.</p>
        ) : (
          <ChangeTable
            caption={`What changed from revision ${left} to ${right}`}
            leftName={`Revision ${left}`}
            rightName={`Revision ${right}`}
            changes={changes}
          />
        )}
      </div>
    </div>
  );
}
