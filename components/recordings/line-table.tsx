"use client";

import { useEffect, useMemo, useRef, useState } from "react";
import { classNames } from "@/components/ui/class-names";
import { formatFigure } from "@/components/ui/figures";
import type { Recording, RecordingLine } from "@/lib/serial/recording";
import { hexOf, printable } from "@/lib/serial/wire-log";

/** px: the line height of figures. */
const ROW_PX = 20;
/** Rows drawn above and below what is in sight. */
const ROWS_AROUND = 40;
/** More than any window is high. */
const ROWS_IN_SIGHT = 80;
/** The head of the file is its first line. */
const FIRST_LINE = 2;

const ARROWS = { out: ["→", "sent"], in: ["←", "received"], event: ["·", "event"] } as const;

export type LineTableProps = {
  readonly recording: Recording;
  /** Lines of the file that stand out. */
  readonly marked: readonly number[];
  /** A line of the file to bring into sight, a new object each time. */
  readonly sight: { readonly line: number } | null;
};

/** All lines of a recording, text and hex side by side; only what is in sight is drawn. */
export function LineTable({ recording, marked, sight }: LineTableProps) {
  const { lines } = recording;
  const box = useRef<HTMLDivElement>(null);
  // Rows are of one height, so which ones are in sight is a division.
  const [topRow, setTopRow] = useState(0);
  const markedLines = useMemo(() => new Set(marked), [marked]);
  useEffect(() => {
    if (sight !== null) box.current?.scrollTo({ top: (sight.line - FIRST_LINE) * ROW_PX - box.current.clientHeight / 2 });
  }, [sight]);
  const first = Math.max(0, Math.min(topRow, lines.length - ROWS_IN_SIGHT) - ROWS_AROUND);
  const last = Math.min(lines.length, first + ROWS_IN_SIGHT + 2 * ROWS_AROUND) - 1;
  return (
    <div
      ref={box}
      onScroll={(event) => setTopRow(Math.floor(event.currentTarget.scrollTop / ROW_PX))}
      className="max-h-[68dvh] flex-1 overflow-auto border-y border-line bg-sunk"
      tabIndex={0}
      role="region"
      aria-label="Exchanges"
    >
      <table className="figure w-full whitespace-nowrap text-left text-muted">
        <caption className="sr-only">The lines in sight</caption>
        <thead className="sr-only">
          <tr>
            <th scope="col">Line</th>
            <th scope="col">Time</th>
            <th scope="col">Direction</th>
            <th scope="col">Text</th>
            <th scope="col">Hex</th>
          </tr>
        </thead>
        {first > 0 ? <tbody aria-hidden><tr><td style={{ height: first * ROW_PX }} /></tr></tbody> : null}
        <tbody>
          {lines.slice(first, last + 1).map((line, index) => {
            const number = first + index + FIRST_LINE;
            return <Line key={number} number={number} line={line} isMarked={markedLines.has(number)} />;
          })}
        </tbody>
        {last < lines.length - 1 ? <tbody aria-hidden><tr><td style={{ height: (lines.length - 1 - last) * ROW_PX }} /></tr></tbody> : null}
      </table>
    </div>
  );
}

function Line({ number, line, isMarked }: { readonly number: number; readonly line: RecordingLine; readonly isMarked: boolean }) {
  const [arrow, word] = ARROWS[line.direction];
  return (
    <tr className={classNames("h-5", isMarked && "bg-[color-mix(in_srgb,var(--halt)_18%,transparent)] text-text")}>
      <td className="px-3 text-right">{number}</td>
      <td className="pr-4 text-right">{formatFigure(line.atMs, "ms", { decimals: 1 })}</td>
      <td className="pr-3 text-signal">
        {arrow}
        <span className="sr-only">{isMarked ? `${word}, differs` : word}</span>
      </td>
      <td className="pr-6 text-text">{line.direction === "event" ? line.text : printable(line.bytes)}</td>
      <td className="pr-3">{line.direction === "event" ? "" : hexOf(line.bytes)}</td>
    </tr>
  );
}
