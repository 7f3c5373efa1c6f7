"use client";

import { useEffect, useState } from "react";
import { useChangeDraft, useVersion } from "@/components/drivers/use-drivers";
import { ApiProblem } from "@/components/ui/api";
import { textOf } from "@/components/drivers/editor/reading";
import type { DraftChange, DriverVersionDetail } from "@/lib/contracts/driver";

export type Draft = {
  /** What the text rests on: as it was loaded, or as it was saved last. */
  readonly base: DriverVersionDetail;
  readonly isChanged: boolean;
  readonly isSaving: boolean;
  /** A save that failed for another reason than that somebody else was there first. */
  readonly error: Error | null;
  /** What somebody else saved meanwhile; the text here is untouched. */
  readonly stale: DriverVersionDetail | null;
  save(definition: DraftChange["definition"], note: string, onSaved?: () => void): void;
  /** From now on the text rests on what somebody else saved. */
  restOn(theirs: DriverVersionDetail): void;
};

/** Warns before the page is left with something that was not saved. */
function useLeaveGuard(isChanged: boolean): void {
  useEffect(() => {
    if (!isChanged) return undefined;
    const guard = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener("beforeunload", guard);
    return () => window.removeEventListener("beforeunload", guard);
  }, [isChanged]);
}

/** Saving of a draft, each save after the revision that it rests on. */
export function useDraft(begun: DriverVersionDetail, { text, note }: { readonly text: string; readonly note: string }): Draft {
  const [kept, setBase] = useState(begun);
  // The text as it was saved, since the server writes the same definition in another layout.
  const [savedText, setSavedText] = useState(() => textOf(begun.definition));
  const [stale, setStale] = useState<DriverVersionDetail | null>(null);
  const change = useChangeDraft(begun);
  const latest = useVersion(begun);
  // A report moves the revision and not the text: then what the server has is what this text rests on.
  const isSame = latest.data?.hash === kept.hash && latest.data.note === kept.note;
  const base = isSame && latest.data !== undefined ? latest.data : kept;
  const isStale = change.error instanceof ApiProblem && change.error.problem.status === 412;
  const isChanged = text !== savedText || note !== base.note;
  useLeaveGuard(isChanged);
  return {
    base,
    isChanged,
    isSaving: change.isPending,
    error: isStale ? null : change.error,
    stale,
    save(definition, savedNote, onSaved) {
      change.mutate(
        { revision: base.revision, definition, note: savedNote },
        {
          onSuccess: (saved) => {
            setBase(saved);
            setSavedText(text);
            setStale(null);
            onSaved?.();
          },
          onError: (error) => {
            if (!(error instanceof ApiProblem) || error.problem.status !== 412) return;
            void latest.refetch().then(({ data }) => {
              if (data !== undefined) setStale(data);
            });
          },
        },
      );
    },
    restOn(theirs) {
      setBase(theirs);
      setSavedText(textOf(theirs.definition));
      setStale(null);
      change.reset();
    },
  };
}
