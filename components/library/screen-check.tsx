"use client";

import { useMemo } from "react";
import { FindingList } from "@/components/bench/finding-list";
import type { ScreenOption } from "@/components/library/use-my-screen";
import { SelectField } from "@/components/ui/field";
import { FindingWord } from "@/components/ui/finding-icon";
import { checkProfile, hasStop } from "@/lib/profile/check/check-profile";
import type { ProfileDocument } from "@/lib/profile/document";

export type ScreenCheckProps = {
  readonly document: ProfileDocument;
  readonly options: readonly ScreenOption[];
  readonly chosen: ScreenOption;
  readonly onChoose: (value: string) => void;
};

/** How a profile stands to a screen: the same check that runs before a write, without a device. */
export function ScreenCheck({ document, options, chosen, onChoose }: ScreenCheckProps) {
  const { envelope } = chosen;
  const findings = useMemo(
    () => (envelope === null ? [] : checkProfile({ document, screen: envelope })),
    [document, envelope],
  );
  const stops = findings.filter((finding) => finding.severity === "stop").length;
  const cautions = findings.filter((finding) => finding.severity === "caution").length;
  return (
    <>
      <SelectField
        label="Hold against"
        options={options}
        value={chosen.value}
        onChange={(event) => onChoose(event.target.value)}
      />
      <div className="mt-4" aria-live="polite">
        {envelope === null ? (
          <p className="text-muted">Choose a screen to see what fits. What a device takes is checked when you apply.</p>
        ) : hasStop(findings) ? (
          <FindingWord severity="stop">
            {stops === 1 ? "One value must change" : `${stops} values must change`}
          </FindingWord>
        ) : cautions > 0 ? (
          <FindingWord severity="caution">
            Fits, with {cautions === 1 ? "one caution" : `${cautions} cautions`}
          </FindingWord>
        ) : (
          <FindingWord severity="fits">Fits {envelope.name}</FindingWord>
        )}
      </div>
      {findings.length === 0 ? null : <FindingList findings={findings} />}
    </>
  );
}
