"use client";

import Link from "next/link";
import { ImportDriverButton } from "@/components/drivers/import-driver-button";
import { NoticeList } from "@/components/drivers/notice-list";
import { firmwareWords, protocolWords, reportWords } from "@/components/drivers/driver-words";
import { useDrivers } from "@/components/drivers/use-drivers";
import { useIsMaintainer } from "@/components/drivers/use-is-maintainer";
import { useSignedIn } from "@/components/shell/signed-in";
import { Button, ButtonLink } from "@/components/ui/button";
import { DataTable } from "@/components/ui/data-table";
import type { DataColumn } from "@/components/ui/data-table";
import { EmptyState } from "@/components/ui/empty-state";
import { formatCount } from "@/components/ui/figures";
import { FindingWord } from "@/components/ui/finding-icon";
import { formatDate } from "@/components/ui/moments";
import { DemoNote, PageHead, PartHead } from "@/components/ui/page-head";
import { ProblemMessage } from "@/components/ui/problem-message";
import type { DriverSummary } from "@/lib/contracts/driver";
import { SIMULATED_SENTENCE } from "@/lib/serial/conformance/report";

/** Device models that Backporch knows how to talk to, and how well that is proved. */
export function DriversView() {
  const user = useSignedIn();
  const isMaintainer = useIsMaintainer();
  const drivers = useDrivers();
  const rows = drivers.data?.pages.flatMap((page) => page.items) ?? [];
  return (
    <div className="gutter flex flex-1 flex-col pb-10">
      <PageHead
        title="Drivers"
        lead="How to talk to each device model, as data: who wrote it, what it says, and what was found out when it was tried."
        acts={
          <>
            {user === null ? null : <ButtonLink href="/recordings">Recordings</ButtonLink>}
            {isMaintainer ? <ImportDriverButton /> : null}
          </>
        }
      />
      <NoticeList className="mb-5" />
      {drivers.error === null ? null : (
        <ProblemMessage error={drivers.error} act={<Button onClick={() => void drivers.refetch()}>Try again</Button>} />
      )}
      {drivers.isPending ? <p className="text-muted">Loading</p> : null}
      {rows.length > 0 ? <DriverTable rows={rows} isMaintainer={isMaintainer} /> : null}
      {drivers.isSuccess && rows.length === 0 ? (
        <EmptyState title="No driver is published">
          Device models stand here from the moment a maintainer publishes the first version of their driver.
        </EmptyState>
      ) : null}
      {drivers.hasNextPage ? (
        <Button
          className="mt-4 self-start"
          disabled={drivers.isFetchingNextPage}
          onClick={() => void drivers.fetchNextPage()}
        >
          Show more
        </Button>
      ) : null}
      <Road />
      <div className="mt-6">
        <DemoNote>Demo: the makers, their devices and the people who keep these drivers are invented.</DemoNote>
      </div>
    </div>
  );
}

function DriverTable({
  rows,
  isMaintainer,
}: {
  readonly rows: readonly DriverSummary[];
  readonly isMaintainer: boolean;
}) {
  const columns: readonly DataColumn<DriverSummary>[] = [
    {
      id: "device",
      header: "Device",
      phone: "head",
      sortBy: ({ maker, model }) => `${maker} ${model}`,
      cell: ({ slug, maker, model }) => (
        <Link href={`/drivers/${slug}`} className="font-strong hover:underline">
          {maker} {model}
        </Link>
      ),
    },
    {
      id: "protocol",
      header: "Protocol",
      sortBy: ({ latest }) => latest?.protocol,
      cell: ({ latest }) => (latest === null ? "–" : protocolWords(latest.protocol)),
    },
    {
      id: "firmware",
      header: "For firmware",
      cell: ({ latest }) => <span className="figure">{latest === null ? "–" : firmwareWords(latest.firmware)}</span>,
    },
    {
      id: "latest",
      header: "Newest version",
      sortBy: ({ latest }) => latest?.version,
      cell: ({ latest }) =>
        latest === null ? (
          <span className="text-muted">none published</span>
        ) : (
          <span>
            <span className="figure">{latest.version}</span>{" "}
            <span className="text-sm text-muted">of {formatDate(new Date(latest.publishedAt))}</span>
          </span>
        ),
    },
    {
      id: "conformance",
      header: "Conformance",
      sortBy: ({ latest }) => reportWords(latest?.report ?? null).words,
      cell: ({ latest }) => <Conformance report={latest?.report ?? null} />,
    },
    ...(isMaintainer ? maintainerColumns : []),
  ];
  return (
    <DataTable
      caption="Drivers by device model"
      columns={columns}
      rows={rows}
      rowKey={({ slug }) => slug}
      sorting={{ id: "device", desc: false }}
    />
  );
}

const maintainerColumns: readonly DataColumn<DriverSummary>[] = [
  {
    id: "unpublished",
    header: "In the making",
    sortBy: ({ unpublished }) => unpublished,
    cell: ({ unpublished }) => (unpublished === 0 ? "–" : formatCount(unpublished, "version", "versions")),
  },
  {
    id: "questions",
    header: "Open questions",
    sortBy: ({ openQuestions }) => openQuestions,
    cell: ({ slug, openQuestions }) =>
      openQuestions === 0 ? (
        "–"
      ) : (
        <Link href={`/drivers/${slug}?part=questions`} className="link">
          {formatCount(openQuestions, "question", "questions")}
        </Link>
      ),
  },
];

function Conformance({ report }: { readonly report: { readonly green: boolean; readonly createdAt: string } | null }) {
  const { severity, words } = reportWords(report);
  return (
    <span className="whitespace-nowrap">
      <FindingWord severity={severity}>{words}</FindingWord>
      {report === null ? null : (
        <span className="text-sm text-muted"> on {formatDate(new Date(report.createdAt))}</span>
      )}
    </span>
  );
}

const steps = [
  ["Draft", "A maintainer writes what the device says and takes. It may be unfinished; each mistake is named by its path."],
  ["Candidate", "The suite ran on this very definition and came out green: every setting at its ends and beyond, every slot, storing, switching off, every fault, and each recording."],
  ["Published", "Owners of the model are told, see what it reads differently on their device, and move when they like."],
  ["Withdrawn", "It was found to be wrong. Owners who use it are told why."],
] as const;

/** How a driver comes to be trusted. */
function Road() {
  return (
    <section className="mt-9">
      <PartHead title="How a driver comes to be trusted" />
      <p className="mb-3 max-w-[72ch] border-l-3 border-signal pl-3">{SIMULATED_SENTENCE}</p>
      <ol className="grid gap-x-8 border-t border-line md:grid-cols-2 xl:grid-cols-4">
        {steps.map(([name, words], index) => (
          <li key={name} className="py-2.5 max-xl:border-b max-xl:border-line">
            <span className="figure mr-2 text-muted">{index + 1}</span>
            <span className="font-strong">{name}</span>
            <span className="block text-muted">{words}</span>
          </li>
        ))}
      </ol>
    </section>
  );
}
