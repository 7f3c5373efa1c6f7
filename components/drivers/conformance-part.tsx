"use client";

import { sectionWords } from "@/components/drivers/driver-words";
import { useReport } from "@/components/drivers/use-drivers";
import { formatCount, formatNumber } from "@/components/ui/figures";
import { FindingWord } from "@/components/ui/finding-icon";
import { formatMoment } from "@/components/ui/moments";
import { ProblemMessage } from "@/components/ui/problem-message";
import { SIMULATED_SENTENCE } from "@/lib/serial/conformance/report";
import type { ConformanceReport, ConformanceSection } from "@/lib/serial/conformance/report";

/** A report of conformance by its id, or that there is none. */
export function ConformancePart({ reportId }: { readonly reportId: string | null }) {
  const report = useReport(reportId);
  if (reportId === null) {
    return (
      <>
        <p>The suite was not run on this definition yet. Publishing needs a green report.</p>
        <p className="mt-2 text-muted">{SIMULATED_SENTENCE}</p>
      </>
    );
  }
  if (report.error !== null) return <ProblemMessage error={report.error} />;
  if (report.data === undefined) return <p className="text-muted">Loading</p>;
  const { data } = report;
  const by = data.author === null ? "" : ` by ${data.author.name}`;
  return (
    <>
      <p className="mb-2">
        <FindingWord severity={data.green ? "fits" : "stop"}>
          {data.green ? "Green" : "Red"}: {verdict(data.report)}
        </FindingWord>
      </p>
      <p className="mb-3 max-w-[72ch] border-l-3 border-signal pl-3 text-sm">{data.report.simulatedSentence}</p>
      <SectionTable sections={data.report.sections} />
      <Failures sections={data.report.sections} />
      <p className="mt-3 text-sm text-muted">
        Run {formatMoment(new Date(data.createdAt))}
        {by}: {formatCount(data.report.exchanges, "exchange", "exchanges")},{" "}
        {formatCount(data.report.bytes, "byte", "bytes")},{" "}
        {data.report.recordings.length === 0
          ? "no recording, so nothing here speaks for hardware"
          : formatCount(data.report.recordings.length, "recording", "recordings")}
        .
      </p>
    </>
  );
}

function verdict({ sections }: ConformanceReport): string {
  const failed = sections.reduce((sum, section) => sum + section.failed, 0);
  const passed = sections.reduce((sum, section) => sum + section.passed, 0);
  const stopped = sections.filter((section) => section.stopped !== null).length;
  if (failed === 0 && stopped === 0) return `all of ${formatCount(passed, "case", "cases")} passed`;
  const unfinished = stopped === 0 ? "" : `, ${formatCount(stopped, "section", "sections")} did not run to the end`;
  return `${formatNumber(failed)} of ${formatCount(passed + failed, "case", "cases")} failed${unfinished}`;
}

function SectionTable({ sections }: { readonly sections: readonly ConformanceSection[] }) {
  return (
    <table className="w-full border-collapse">
      <caption className="sr-only">Sections of the report</caption>
      <thead>
        <tr className="border-b border-line text-left text-sm text-muted">
          <th scope="col" className="py-1.5 pr-4 font-[500]">Section</th>
          <th scope="col" className="py-1.5 pr-4 text-right font-[500]">Passed</th>
          <th scope="col" className="py-1.5 text-right font-[500]">Failed</th>
        </tr>
      </thead>
      <tbody>
        {sections.map((section) => (
          <tr key={section.name} className="border-b border-line align-top">
            <th scope="row" className="py-1.5 pr-4 text-left font-[450]">
              <FindingWord severity={section.failed > 0 || section.stopped !== null ? "stop" : "fits"}>
                {sectionWords[section.name]}
              </FindingWord>
              {section.stopped === null ? null : <span className="block pl-5.5 text-sm">{section.stopped}</span>}
              {section.notes.map((note) => (
                <span key={note} className="block pl-5.5 text-sm text-muted">{note}</span>
              ))}
            </th>
            <td className="figure py-1.5 pr-4 text-right">{formatNumber(section.passed)}</td>
            <td className="figure py-1.5 text-right">{formatNumber(section.failed)}</td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

function Failures({ sections }: { readonly sections: readonly ConformanceSection[] }) {
  const broken = sections.filter(({ cases }) => cases.length > 0);
  if (broken.length === 0) return null;
  return (
    <div className="mt-4">
      <h2 className="mb-1 text-lg">What failed</h2>
      {broken.map(({ name, cases, failed }) => (
        <details key={name} open className="border-b border-line py-1.5">
          <summary className="font-strong">
            {sectionWords[name]}: {formatNumber(failed)}
            {failed > cases.length ? `, the first ${cases.length} by name` : ""}
          </summary>
          <ul className="mt-1">
            {cases.map((one, index) => (
              <li key={`${index} ${one.name}`} className="grid gap-x-6 border-t border-line py-1 md:grid-cols-[minmax(0,2fr)_minmax(0,3fr)]">
                <span className="figure break-words">{one.name}</span>
                <span className="break-words">{one.message}</span>
              </li>
            ))}
          </ul>
        </details>
      ))}
    </div>
  );
}
