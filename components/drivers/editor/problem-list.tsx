"use client";

import type { PlacedProblem } from "@/components/drivers/editor/reading";
import { FindingWord } from "@/components/ui/finding-icon";
import { formatCount } from "@/components/ui/figures";

export type ProblemListProps = {
  readonly id: string;
  readonly problems: readonly PlacedProblem[];
  readonly onLine: (line: number) => void;
};

/** What is wrong with the text, by path; each complaint leads to its line. */
export function ProblemList({ id, problems, onLine }: ProblemListProps) {
  return (
    <div id={id} className="max-h-44 shrink-0 overflow-y-auto px-4 py-2 md:px-7" tabIndex={0} role="region" aria-label="Problems">
      <p role="status">
        {problems.length === 0 ? (
          <FindingWord severity="fits">It compiles.</FindingWord>
        ) : (
          <FindingWord severity="stop">{formatCount(problems.length, "complaint", "complaints")}</FindingWord>
        )}
      </p>
      <ul>
        {problems.map(({ path, message, line }, index) => (
          <li key={`${index} ${path}`} className="grid grid-cols-[4.5rem_minmax(0,1fr)] gap-x-3 border-t border-line py-1">
            {line === null ? (
              <span className="text-sm text-muted">the whole</span>
            ) : (
              <button type="button" className="link text-left text-sm" onClick={() => onLine(line)}>
                line {line}
              </button>
            )}
            <span className="min-w-0">
              {path === "" ? null : <code className="figure mr-2 break-all">{path}</code>}
              {message}
            </span>
          </li>
        ))}
      </ul>
    </div>
  );
}
