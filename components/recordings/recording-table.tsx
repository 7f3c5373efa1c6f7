"use client";

import Link from "next/link";
import { DataTable } from "@/components/ui/data-table";
import type { DataColumn } from "@/components/ui/data-table";
import { formatNumber } from "@/components/ui/figures";
import { formatMoment } from "@/components/ui/moments";
import type { RecordingView } from "@/lib/contracts/recording";

/** "Lanternfield LF-8" where the page knows the model, else the driver's slug. */
export type ModelName = (slug: string) => string;

/** When a recording began; one of another program may not say. */
export function beganWords({ startedAt, createdAt }: RecordingView): string {
  return formatMoment(new Date(startedAt ?? createdAt));
}

function columnsOf(version: string | null, modelName: ModelName | null): readonly DataColumn<RecordingView>[] {
  return [
    {
      id: "name",
      header: "Recording",
      phone: "head",
      sortBy: ({ name }) => name,
      cell: ({ id, name }) => (
        <Link href={`/recordings/${id}${version === null ? "" : `?version=${version}`}`} className="break-words font-strong hover:underline">
          {name}
        </Link>
      ),
    },
    ...(modelName === null
      ? []
      : [
          {
            id: "model",
            header: "Device model",
            sortBy: ({ driver }) => modelName(driver.slug),
            cell: ({ driver }) => modelName(driver.slug),
          } satisfies DataColumn<RecordingView>,
        ]),
    {
      id: "made",
      header: "Made with",
      sortBy: ({ driver }) => driver.version,
      cell: ({ driver }) => <span className="figure">{driver.version}</span>,
    },
    {
      id: "began",
      header: "Began",
      sortBy: ({ startedAt, createdAt }) => startedAt ?? createdAt,
      cell: (row) => <span className="figure whitespace-nowrap">{beganWords(row)}</span>,
    },
    {
      id: "exchanges",
      header: "Exchanges",
      align: "end",
      sortBy: ({ exchanges }) => exchanges,
      cell: ({ exchanges }) => <span className="figure">{formatNumber(exchanges)}</span>,
    },
    {
      id: "struck",
      header: "Names",
      sortBy: ({ struckOut }) => String(struckOut),
      cell: ({ struckOut }) => (struckOut ? "struck out" : "as they were"),
    },
    {
      id: "by",
      header: "By",
      sortBy: ({ owner }) => owner.name,
      cell: ({ owner, mine }) => (mine ? "you" : owner.name),
    },
    {
      id: "seen",
      header: "Seen by",
      phone: "hidden",
      sortBy: ({ questions }) => questions,
      cell: ({ questions, mine }) => (questions > 0 ? "the maintainers" : mine ? "you alone" : "its owner"),
    },
  ];
}

/** Recordings, latest first. */
export function RecordingTable({
  rows,
  version = null,
  modelName = null,
}: {
  readonly rows: readonly RecordingView[];
  /** The driver version that a recording is compared with when it is opened. */
  readonly version?: string | null;
  readonly modelName?: ModelName | null;
}) {
  return (
    <DataTable
      caption="Recordings"
      columns={columnsOf(version, modelName)}
      rows={rows}
      rowKey={({ id }) => id}
      sorting={{ id: "began", desc: true }}
    />
  );
}
