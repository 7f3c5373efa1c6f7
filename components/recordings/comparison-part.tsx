"use client";

import { useEffect, useMemo, useState } from "react";
import { stateWords } from "@/components/drivers/driver-words";
import { useVersion, useVersions } from "@/components/drivers/use-drivers";
import { byteWords, comparisonOf, markedLines } from "@/components/recordings/comparison";
import type { ShownComparison } from "@/components/recordings/comparison";
import { SelectField } from "@/components/ui/field";
import { formatCount } from "@/components/ui/figures";
import { FindingWord } from "@/components/ui/finding-icon";
import { ProblemMessage } from "@/components/ui/problem-message";
import type { Recording } from "@/lib/serial/recording";
import { MAX_DIFFERENCES, type RecordingDifference } from "@/lib/serial/replay/compare-recording";

export type ComparisonPartProps = {
  /** Of the driver that the recording was made with. */
  readonly slug: string;
  /** Version to begin with; null: the highest published one. */
  readonly first: string | null;
  readonly recording: Recording;
  readonly onMarked: (lines: readonly number[]) => void;
  readonly onLine: (line: number) => void;
};

/** Plays a recording against a driver version: what it would say, and how it reads what was answered. */
export function ComparisonPart({ slug, first, recording, onMarked, onLine }: ComparisonPartProps) {
  const versions = useVersions(slug);
  const rows = versions.data?.pages.flatMap((page) => page.items) ?? [];
  const [wanted, setWanted] = useState(first);
  const chosen = rows.find(({ version }) => version === wanted) ?? rows.find(({ state }) => state === "published") ?? rows[0];
  const detail = useVersion(chosen === undefined ? null : { slug, version: chosen.version });
  const definition = detail.data?.definition;
  const compared = useMemo(
    () => (definition === undefined ? null : comparisonOf(definition, recording)),
    [definition, recording],
  );
  useEffect(() => onMarked(compared === null ? [] : markedLines(compared)), [compared, onMarked]);
  if (versions.error !== null) {
    return <p className="text-muted">There is no driver {slug} here to compare with.</p>;
  }
  return (
    <>
      {chosen === undefined ? null : (
        <SelectField
          label="Driver version"
          fieldClassName="mb-3 max-w-[260px]"
          value={chosen.version}
          onChange={(event) => setWanted(event.target.value)}
          options={rows.map((row) => ({ value: row.version, label: `${row.version}, ${stateWords[row.state]}` }))}
        />
      )}
      {detail.error === null ? null : <ProblemMessage error={detail.error} />}
      <div aria-live="polite">
        {compared === null ? <p className="text-muted">Loading</p> : <Compared compared={compared} onLine={onLine} />}
      </div>
    </>
  );
}

function Compared({ compared, onLine }: { readonly compared: ShownComparison; readonly onLine: (line: number) => void }) {
  if (compared.kind === "no-driver") {
    return (
      <>
        <FindingWord severity="stop">This version does not compile, so it says nothing.</FindingWord>
        <ul className="mt-2">
          {compared.problems.map(({ path, message }) => (
            <li key={`${path} ${message}`} className="border-t border-line py-1">
              <code className="figure break-all">{path}</code> {message}
            </li>
          ))}
        </ul>
      </>
    );
  }
  const { exchanges, differences, unanswered, unasked, values } = compared.result;
  const least = differences.length >= MAX_DIFFERENCES ? "at least " : "";
  return (
    <>
      <p>
        {differences.length === 0 ? (
          <FindingWord severity="fits">The driver says the same in all of {formatCount(exchanges.length, "exchange", "exchanges")}.</FindingWord>
        ) : (
          <FindingWord severity="stop">
            The driver differs in {least}{formatCount(differences.length, "place", "places")}.
          </FindingWord>
        )}
      </p>
      <p className="mt-1 text-sm text-muted">
        {formatCount(Object.keys(values).length, "value", "values")} read; {formatCount(unanswered, "request", "requests")} without an
        answer; {formatCount(unasked, "frame", "frames")} that nobody asked for.
        {compared.leftOut > 0 ? ` The last ${formatCount(compared.leftOut, "line was", "lines were")} not looked at.` : ""}
      </p>
      <ol className="mt-3">
        {differences.map((difference, index) => (
          <Difference key={`${difference.line} ${difference.kind}`} difference={difference} isFirst={index === 0} onLine={onLine} />
        ))}
      </ol>
    </>
  );
}

function Difference({ difference, isFirst, onLine }: { readonly difference: RecordingDifference; readonly isFirst: boolean; readonly onLine: (line: number) => void }) {
  const { kind, line, offset, expected, got, recorded, driver, message } = difference;
  return (
    <li className="border-t border-line py-2">
      <p>
        <button type="button" className="link font-strong" onClick={() => onLine(line)}>
          Line {line}
        </button>
        {isFirst ? ", the first" : ""}: {message}
      </p>
      <dl className="figure mt-1 grid grid-cols-[max-content_minmax(0,1fr)] gap-x-4">
        {kind === "says" ? (
          <>
            <dt className="text-muted">byte {offset}</dt>
            <dd>
              expected {byteWords(expected)}, got {byteWords(got)}
            </dd>
          </>
        ) : null}
        <dt className="text-muted">recorded</dt>
        <dd className="break-words">{recorded}</dd>
        <dt className="text-muted">{kind === "says" ? "driver says" : "asked"}</dt>
        <dd className="break-words">{driver === "" ? "nothing" : driver}</dd>
      </dl>
    </li>
  );
}
