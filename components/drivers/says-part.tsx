"use client";

import { useMemo } from "react";
import type { UseQueryResult } from "@tanstack/react-query";
import { driverFacts, settingRows } from "@/components/drivers/driver-words";
import type { SettingRow } from "@/components/drivers/driver-words";
import { DataTable } from "@/components/ui/data-table";
import type { DataColumn } from "@/components/ui/data-table";
import { FindingWord } from "@/components/ui/finding-icon";
import { formatCount } from "@/components/ui/figures";
import { PartHead } from "@/components/ui/page-head";
import { ProblemMessage } from "@/components/ui/problem-message";
import type { DriverVersionDetail } from "@/lib/contracts/driver";
import { parseDefinition } from "@/lib/serial/driver/parse-definition";

/** What a version says, in words: the line, the device, each setting with its range. */
export function SaysPart({ detail }: { readonly detail: UseQueryResult<DriverVersionDetail> }) {
  const { data, error } = detail;
  const parsed = useMemo(() => (data === undefined ? null : parseDefinition(data.definition)), [data]);
  if (error !== null) return <ProblemMessage error={error} />;
  if (data === undefined || parsed === null) return <p className="text-muted">Loading</p>;
  if (!parsed.ok) {
    return (
      <>
        <p className="mb-2">
          <FindingWord severity="stop">
            It does not compile: {formatCount(parsed.error.length, "complaint", "complaints")}.
          </FindingWord>
        </p>
        <ul>
          {parsed.error.map(({ path, message }) => (
            <li key={`${path} ${message}`} className="border-t border-line py-1">
              <code className="figure break-all">{path === "" ? "the whole" : path}</code> {message}
            </li>
          ))}
        </ul>
      </>
    );
  }
  const { definition } = parsed.value;
  return (
    <>
      <dl className="mb-7 grid grid-cols-1 border-t border-line md:grid-cols-[max-content_minmax(0,1fr)]">
        {driverFacts(definition).map(({ name, words }) => (
          <div key={name} className="border-b border-line py-1.5 md:col-span-2 md:grid md:grid-cols-subgrid md:gap-x-8">
            <dt className="text-muted">{name}</dt>
            <dd>{words}</dd>
          </div>
        ))}
      </dl>
      <PartHead title="Settings" aside={formatCount(definition.settings.length, "setting", "settings")} />
      <DataTable caption="Settings of this driver" columns={columns} rows={settingRows(definition)} rowKey={({ key }) => key} />
    </>
  );
}

const columns: readonly DataColumn<SettingRow>[] = [
  { id: "label", header: "Setting", phone: "head", sortBy: ({ label }) => label, cell: ({ label }) => <span className="font-strong">{label}</span> },
  { id: "reach", header: "Reach", sortBy: ({ reach }) => reach, cell: ({ reach }) => reach },
  { id: "range", header: "Range", cell: ({ range }) => <span className="figure">{range}</span> },
  { id: "access", header: "On the wire", sortBy: ({ access }) => access, cell: ({ access }) => access },
  { id: "key", header: "Path", sortBy: ({ key }) => key, cell: ({ key }) => <code className="figure break-all text-muted">{key}</code> },
];
