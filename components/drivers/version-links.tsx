"use client";

import Link from "next/link";
import { reportWords, stateWords } from "@/components/drivers/driver-words";
import { classNames } from "@/components/ui/class-names";
import { FindingWord } from "@/components/ui/finding-icon";
import { formatDate } from "@/components/ui/moments";
import type { DriverVersionView } from "@/lib/contracts/driver";

/** A driver's versions, highest first. */
export function VersionLinks({
  rows,
  chosen,
}: {
  readonly rows: readonly DriverVersionView[];
  readonly chosen: DriverVersionView;
}) {
  return (
    <ul>
      {rows.map((row) => {
        const { severity, words } = reportWords(row.report);
        const isCurrent = row.version === chosen.version;
        return (
          <li key={row.version}>
            <Link
              href={`/drivers/${row.slug}?version=${row.version}`}
              scroll={false}
              aria-current={isCurrent ? "true" : undefined}
              className={classNames(
                "block border-b border-line px-3 py-2 hover:bg-surface",
                isCurrent && "bg-surface shadow-[inset_3px_0_0_var(--lamp)]",
              )}
            >
              <span className="flex items-baseline justify-between gap-3">
                <span className="figure font-strong">{row.version}</span>
                <span className="text-sm text-muted">{formatDate(new Date(dateOf(row)))}</span>
              </span>
              <span className="flex flex-wrap items-baseline justify-between gap-x-3 text-sm">
                <span className={row.state === "withdrawn" ? "font-strong text-halt" : ""}>{stateWords[row.state]}</span>
                <FindingWord severity={severity}>{words}</FindingWord>
              </span>
            </Link>
          </li>
        );
      })}
    </ul>
  );
}

/** When it came to be what it is. */
function dateOf({ state, withdrawnAt, publishedAt, updatedAt }: DriverVersionView): string {
  if (state === "withdrawn") return withdrawnAt ?? updatedAt;
  return state === "published" ? (publishedAt ?? updatedAt) : updatedAt;
}
