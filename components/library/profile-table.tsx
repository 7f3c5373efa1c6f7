"use client";

import Link from "next/link";
import { drawable } from "@/components/library/document-view";
import { fitSummary } from "@/components/library/fit-summary";
import type { ScreenOption } from "@/components/library/use-my-screen";
import { DataTable } from "@/components/ui/data-table";
import type { DataColumn } from "@/components/ui/data-table";
import { formatCount, formatLineRateSpan } from "@/components/ui/figures";
import { FindingWord } from "@/components/ui/finding-icon";
import { formatDate } from "@/components/ui/moments";
import { ModeMark } from "@/components/video/mode-glyph";
import type { ProfileSummary } from "@/lib/contracts/profile";

const MODES_SHOWN = 2;

/** Profiles in a table; with a screen, how their modes stand to it. */
export function ProfileTable({
  rows,
  screen,
}: {
  readonly rows: readonly ProfileSummary[];
  readonly screen: ScreenOption;
}) {
  const { envelope } = screen;
  const columns: readonly DataColumn<ProfileSummary>[] = [
    {
      id: "title",
      header: "Profile",
      phone: "head",
      sortBy: (row) => row.title,
      cell: (row) => (
        <>
          <Link href={profileHref(row.id, screen)} className="text-lg font-strong hover:underline">
            {row.title}
          </Link>
          {row.visibility === "private" ? <span className="ml-2 text-sm text-muted">private</span> : null}
          <span className="block max-w-[60ch] text-sm text-muted">{row.summary}</span>
          <span className="block text-sm text-muted md:hidden">
            {row.owner.name}, revision {row.currentRevision}, {formatDate(new Date(row.updatedAt))}
          </span>
        </>
      ),
    },
    {
      id: "modes",
      header: "Modes",
      phone: "bare",
      sortBy: (row) => row.lineRateHz?.[0],
      cell: (row) => <OutlineModes row={row} />,
    },
    ...(envelope === null
      ? []
      : [
          {
            id: "fit",
            header: "On this screen",
            phone: "bare",
            sortBy: (row: ProfileSummary) => fitSummary(row.outline, envelope).severity,
            cell: (row: ProfileSummary) => {
              const fit = fitSummary(row.outline, envelope);
              return <FindingWord severity={fit.severity}>{fit.words}</FindingWord>;
            },
          } satisfies DataColumn<ProfileSummary>,
        ]),
    {
      id: "slots",
      header: "Slots",
      phone: "hidden",
      align: "end",
      sortBy: (row) => row.outline.slotCount,
      cell: (row) => <span className="figure">{row.outline.slotCount}</span>,
    },
    { id: "by", header: "By", phone: "hidden", sortBy: (row) => row.owner.name, cell: (row) => row.owner.name },
    {
      id: "revision",
      header: "Revision",
      phone: "hidden",
      align: "end",
      sortBy: (row) => row.currentRevision,
      cell: (row) => <span className="figure">{row.currentRevision}</span>,
    },
    {
      id: "changed",
      header: "Changed",
      phone: "hidden",
      sortBy: (row) => row.updatedAt,
      cell: (row) => <span className="figure whitespace-nowrap">{formatDate(new Date(row.updatedAt))}</span>,
    },
  ];
  return <DataTable caption="Profiles" columns={columns} rows={rows} rowKey={(row) => row.id} />;
}

function profileHref(id: string, screen: ScreenOption): string {
  return screen.value === "" ? `/library/${id}` : `/library/${id}?screen=${screen.value}`;
}

function OutlineModes({ row }: { readonly row: ProfileSummary }) {
  const timings = row.outline.modes.flatMap((mode) => drawable(mode.timing) ?? []);
  const more = row.outline.modeCount - Math.min(MODES_SHOWN, timings.length);
  return (
    <span className="flex flex-col gap-0.5">
      {timings.slice(0, MODES_SHOWN).map((timing, index) => (
        <ModeMark key={index} timing={timing} />
      ))}
      {more > 0 ? <span className="text-sm text-muted">{formatCount(more, "more", "more")}</span> : null}
      {row.lineRateHz === null ? null : <span className="sr-only">{formatLineRateSpan(row.lineRateHz)}</span>}
    </span>
  );
}
