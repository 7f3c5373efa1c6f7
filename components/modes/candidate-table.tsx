"use client";

import { useMemo } from "react";
import { DataTable } from "@/components/ui/data-table";
import type { DataColumn } from "@/components/ui/data-table";
import { CautionIcon } from "@/components/ui/finding-icon";
import { formatCount, formatFieldRate, formatLineRate } from "@/components/ui/figures";
import { ModeGlyph } from "@/components/video/mode-glyph";
import { useModes, useModesActs } from "@/components/modes/modes-context";
import { followsSource, type Candidate } from "@/components/modes/store/answer";
import { blankingCaution, candidateNotes, frameWords, ratioWords } from "@/components/modes/words";
import type { SourceFormat } from "@/lib/timing/raster";
import { activeFrameLines } from "@/lib/timing/rates";

/** Rasters to choose from, the best first. The one in hand is marked; its name is the button that takes another. */
export function CandidateTable() {
  const answer = useModes((state) => state.answer);
  const source = useModes((state) => state.choices.source);
  const follows = useModes((state) => followsSource(state.choices));
  const { pick } = useModesActs();
  const handKey = answer?.hand?.key;
  const isNear = answer?.outcome.fits.length === 0;
  const columns = useMemo(
    () => columnsFor({ source, follows, handKey, isNear, onPick: (candidate) => pick(candidate.timing) }),
    [source, follows, handKey, isNear, pick],
  );
  if (answer === null) return null;
  return (
    <DataTable
      caption={isNear ? "The nearest rasters that fit" : "Rasters that fit"}
      columns={columns}
      rows={answer.candidates}
      rowKey={({ key }) => key}
      isMarked={({ key }) => key === handKey}
      onRow={({ kind, timing }) => {
        if (kind !== "hand") pick(timing);
      }}
    />
  );
}

type Shown = {
  readonly source: SourceFormat | null;
  readonly follows: boolean;
  readonly handKey: string | undefined;
  readonly isNear: boolean;
  readonly onPick: (candidate: Candidate) => void;
};

function columnsFor({ source, follows, handKey, isNear, onPick }: Shown): readonly DataColumn<Candidate>[] {
  const ofSource: DataColumn<Candidate>[] =
    source === null
      ? []
      : [
          { id: "ratio", header: `${source.activeLines} lines`, cell: (row) => <Ratio row={row} source={source} /> },
          {
            id: "frames",
            header: "Frames",
            cell: ({ timing }) => (
              <span className="text-muted md:whitespace-nowrap">{frameWords(timing, source, follows)}</span>
            ),
          },
        ];
  return [
    {
      id: "glyph",
      header: "Waveforms",
      hideHeader: true,
      phone: "bare",
      cell: ({ timing }) => <ModeGlyph timing={timing} className="md:-mr-3 md:w-[100px]" />,
    },
    {
      id: "raster",
      header: "Raster",
      phone: "head",
      cell: (row) => <Name row={row} isInHand={row.key === handKey} onPick={onPick} />,
    },
    {
      id: "line",
      header: "Line rate",
      cell: ({ lineRateHz }) => <span className="figure whitespace-nowrap">{formatLineRate(lineRateHz)}</span>,
    },
    ...ofSource,
    { id: "notes", header: isNear ? "Gives up" : "Notes", cell: (row) => <Notes row={row} /> },
  ];
}

function Name({
  row,
  isInHand,
  onPick,
}: {
  readonly row: Candidate;
  readonly isInHand: boolean;
  readonly onPick: (row: Candidate) => void;
}) {
  const { timing, fieldRateHz, kind } = row;
  const words = (
    <>
      <span className="whitespace-nowrap font-strong">{formatCount(activeFrameLines(timing), "line", "lines")}</span>
      {timing.interlaced ? <span className="text-muted"> interlaced</span> : null}{" "}
      <span className="figure whitespace-nowrap">{formatFieldRate(fieldRateHz)}</span>
    </>
  );
  return (
    <>
      {kind === "hand" ? (
        <span className="block py-1">{words}</span>
      ) : (
        <button
          type="button"
          aria-pressed={isInHand}
          onClick={(event) => {
            event.stopPropagation();
            onPick(row);
          }}
          className="min-h-7 text-left hover:underline"
        >
          {words}
        </button>
      )}
      {kind === "hand" ? <span className="block text-sm text-muted">made by hand</span> : null}
    </>
  );
}

function Ratio({ row, source }: { readonly row: Candidate; readonly source: SourceFormat }) {
  const { ratio, isWhole } = ratioWords(row.timing, source);
  return (
    <span className="whitespace-nowrap">
      <span className="figure">{ratio}</span> <span className="text-muted">{isWhole ? "whole" : "uneven"}</span>
    </span>
  );
}

function Notes({ row }: { readonly row: Candidate }) {
  const notes = candidateNotes(row);
  const caution = blankingCaution(row);
  return (
    <span className="text-muted">
      {notes.length === 0 && caution === null ? (row.kind === "fits" ? "nothing given up" : "–") : notes.join("; ")}
      {caution === null ? null : (
        <span className="block">
          <CautionIcon className="mr-1.5 size-3.5 align-[-2px]" />
          {caution}
        </span>
      )}
    </span>
  );
}
