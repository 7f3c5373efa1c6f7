"use client";

import { Button } from "@/components/ui/button";
import { Checkbox } from "@/components/ui/checkbox";
import { FindingIcon } from "@/components/ui/finding-icon";
import { classNames } from "@/components/ui/class-names";
import { groupFindings, staysAsItIs, type FindingGroup } from "@/components/bench/finding-groups";
import type { Finding, Remedy } from "@/lib/profile/finding";

export type FindingListProps = {
  readonly findings: readonly Finding[];
  /** `rule` + " " + `path` of the cautions that were acknowledged. */
  readonly acknowledged?: readonly string[];
  readonly onAcknowledge?: (keys: readonly string[], isRead: boolean) => void;
  readonly onRemedy?: (remedy: Remedy) => void;
  /** A restore takes a backup as it is: only leaving a slot out is offered then. */
  readonly canSetValues?: boolean;
  /** Native keys that a plan changes: what is about others is told in one. */
  readonly changedKeys?: readonly string[];
};

/** Findings, the hardest first; each states the fact, the limit and the way out. */
export function FindingList({ findings, acknowledged = [], onAcknowledge, onRemedy, canSetValues = true, changedKeys }: FindingListProps) {
  return (
    <ul aria-live="polite" className="divide-y divide-line">
      {groupFindings(findings, changedKeys ? (finding) => staysAsItIs(finding, changedKeys) : undefined).map((group) => (
        <li key={group.key} className="py-3" data-rule={group.rule} data-severity={group.severity}>
          <FindingText group={group} />
          {onRemedy === undefined ? null : <Remedies remedies={canSetValues ? group.remedies : group.remedies.filter((remedy) => remedy.kind === "leave-out")} onRemedy={onRemedy} />}
          {group.severity === "caution" && onAcknowledge !== undefined ? (
            <div className="mt-2">
              <Checkbox label="I have read this" checked={group.keys.every((key) => acknowledged.includes(key))} onChange={(isRead) => onAcknowledge(group.keys, isRead)} />
            </div>
          ) : null}
        </li>
      ))}
    </ul>
  );
}

function Remedies({ remedies, onRemedy }: { readonly remedies: readonly Remedy[]; readonly onRemedy: (remedy: Remedy) => void }) {
  if (remedies.length === 0) return null;
  return (
    <div className="mt-2 flex flex-wrap gap-2.5">
      {remedies.map((remedy) => <Button key={remedy.label} onClick={() => onRemedy(remedy)}>{remedy.label}</Button>)}
    </div>
  );
}

const WORDS = { stop: "Stop: ", caution: "Caution: ", note: "Note: " } as const;

function FindingText({ group }: { readonly group: FindingGroup }) {
  return (
    <div className="flex gap-2">
      <FindingIcon severity={group.severity} className="mt-[3px]" />
      <div className="min-w-0">
        <div className={classNames("font-strong", group.severity === "stop" && "text-halt")}>
          <span className="sr-only">{WORDS[group.severity]}</span>
          {group.sentence}
        </div>
        {group.details.map((detail) => <div key={detail} className="text-muted">{detail}</div>)}
        {group.limitSource === undefined ? null : <div className="text-sm text-muted">Limit from: {group.limitSource}</div>}
      </div>
    </div>
  );
}
