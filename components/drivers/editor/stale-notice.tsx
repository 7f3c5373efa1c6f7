"use client";

import { useMemo } from "react";
import { valueWords } from "@/components/drivers/driver-words";
import type { Draft } from "@/components/drivers/editor/use-draft";
import { Button } from "@/components/ui/button";
import { formatCount } from "@/components/ui/figures";
import { StopIcon } from "@/components/ui/finding-icon";
import { formatMoment } from "@/components/ui/moments";
import type { DriverVersionDetail } from "@/lib/contracts/driver";
import { diffDefinitions } from "@/lib/serial/driver/diff-definitions";
import { readDefinitionText } from "@/lib/serial/driver/parse-definition";

/** Differences that are listed; the rest is counted. */
const MAX_LISTED = 20;

export type StaleNoticeProps = {
  readonly draft: Draft;
  readonly text: string;
  readonly onTake: (theirs: DriverVersionDetail) => void;
};

/** Somebody else saved this draft meanwhile: what they changed, and both ways on. The text here stays until one is chosen. */
export function StaleNotice({ draft, text, onTake }: StaleNoticeProps) {
  const theirs = draft.stale;
  const differences = useMemo(() => {
    const mine = readDefinitionText(text);
    return theirs === null || !mine.ok ? null : diffDefinitions(theirs.definition, mine.value);
  }, [theirs, text]);
  if (theirs === null) return null;
  return (
    <div role="alert" className="mb-4 border-l-3 border-halt bg-surface px-4 py-3">
      <p className="flex items-start gap-2.5">
        <StopIcon className="mt-0.5" />
        <span>
          <strong className="text-halt">Not saved: {theirs.author?.name ?? "somebody else"} saved this draft at {formatMoment(new Date(theirs.updatedAt))}.</strong>{" "}
          Your text is still here.
        </span>
      </p>
      {differences === null ? null : (
        <details className="mt-2">
          <summary className="font-strong">{formatCount(differences.changes.length, "place differs", "places differ")} from theirs to yours</summary>
          <ul className="mt-1 max-h-40 overflow-y-auto" tabIndex={0}>
            {differences.changes.slice(0, MAX_LISTED).map(({ path, left, right }) => (
              <li key={path} className="figure border-t border-line py-0.5">
                {path}: {valueWords(left)} → {valueWords(right)}
              </li>
            ))}
          </ul>
        </details>
      )}
      <div className="mt-3 flex flex-wrap gap-3">
        <Button onClick={() => draft.restOn(theirs)}>Keep my text, then save over theirs</Button>
        <Button
          onClick={() => {
            onTake(theirs);
            draft.restOn(theirs);
          }}
        >
          Take their text
        </Button>
      </div>
    </div>
  );
}
