"use client";

import { Button } from "@/components/ui/button";
import { Checkbox } from "@/components/ui/checkbox";
import { FindingIcon } from "@/components/ui/finding-icon";
import { classNames } from "@/components/ui/class-names";
import type { Finding, Remedy } from "@/lib/profile/finding";

export type FindingListProps = {
  readonly findings: readonly Finding[];
  /** `rule` + " " + `path` of the cautions that were acknowledged. */
  readonly acknowledged?: readonly string[];
  readonly onAcknowledge?: (key: string, on: boolean) => void;
  readonly onRemedy?: (remedy: Remedy) => void;
  /** A restore takes a backup as it is: only leaving a slot out is offered then. */
  readonly canSetValues?: boolean;
};

/** What names a caution for an acknowledgement. */
export function findingKey(finding: Finding): string {
  return `${finding.rule} ${finding.path}`;
}

function offered(finding: Finding, canSetValues: boolean): readonly Remedy[] {
  return canSetValues ? finding.remedies : finding.remedies.filter((remedy) => remedy.kind === "leave-out");
}

const ORDER = { stop: 0, caution: 1, note: 2 } as const;

/** Findings, the hardest first; each states the fact, the limit and the way out. */
export function FindingList({ findings, acknowledged = [], onAcknowledge, onRemedy, canSetValues = true }: FindingListProps) {
  const sorted = [...findings].sort((a, b) => ORDER[a.severity] - ORDER[b.severity]);
  return (
    <ul aria-live="polite" className="divide-y divide-line">
      {sorted.map((finding) => (
        <li key={findingKey(finding)} className="py-3" data-rule={finding.rule} data-severity={finding.severity}>
          <FindingText finding={finding} />
          {onRemedy !== undefined && offered(finding, canSetValues).length > 0 ? (
            <div className="mt-2 flex flex-wrap gap-2.5">
              {offered(finding, canSetValues).map((remedy) => (
                <Button key={remedy.label} onClick={() => onRemedy(remedy)}>
                  {remedy.label}
                </Button>
              ))}
            </div>
          ) : null}
          {finding.severity === "caution" && onAcknowledge !== undefined ? (
            <div className="mt-2">
              <Checkbox
                label="I have read this"
                checked={acknowledged.includes(findingKey(finding))}
                onChange={(on) => onAcknowledge(findingKey(finding), on)}
              />
            </div>
          ) : null}
        </li>
      ))}
    </ul>
  );
}

const WORDS = { stop: "Stop: ", caution: "Caution: ", note: "Note: " } as const;

function FindingText({ finding }: { readonly finding: Finding }) {
  return (
    <div className="flex gap-2">
      <FindingIcon severity={finding.severity} className="mt-[3px]" />
      <div className="min-w-0">
        <div className={classNames("font-strong", finding.severity === "stop" && "text-halt")}>
          <span className="sr-only">{WORDS[finding.severity]}</span>
          {finding.sentence}
        </div>
        {finding.detail === undefined ? null : <div className="text-muted">{finding.detail}</div>}
        {finding.limitSource === undefined ? null : <div className="text-sm text-muted">Limit from: {finding.limitSource}</div>}
      </div>
    </div>
  );
}
