"use client";

import { memo, useEffect, useRef, useState } from "react";
import { useStore } from "zustand";
import { formatFigure } from "@/components/ui/figures";
import { classNames } from "@/components/ui/class-names";
import { hexOf, type WireEntry } from "@/lib/serial/wire-log";
import { useBenchCore } from "@/components/bench/bench-provider";
import { isInStretch } from "@/components/bench/wire-view";

/** px: the line height of figures. */
const ROW_PX = 20;
/** Rows drawn above and below what is in sight, so that a page read aloud or searched by the browser has some. */
const ROWS_AROUND = 60;
/** More than 40 % of any screen is high. */
const ROWS_IN_SIGHT = 60;
/** Lines that stand under a closed drawer's head. */
const LINES_CLOSED = 3;

const ARROWS = { out: ["→", "sent"], in: ["←", "received"], event: ["·", "event"] } as const;

function clockTime(wallMs: number): string {
  const at = new Date(wallMs);
  const two = (value: number) => String(value).padStart(2, "0");
  return `${two(at.getHours())}:${two(at.getMinutes())}:${two(at.getSeconds())}.${String(at.getMilliseconds()).padStart(3, "0")}`;
}

/** The lines of the wire log: the whole ring can be scrolled through, only what is in sight is drawn. */
export function WireTable({ isOpen }: { readonly isOpen: boolean }) {
  return isOpen ? <OpenTable /> : <ClosedTable />;
}

function ClosedTable() {
  const entries = useStore(useBenchCore().wireView.store, (state) => state.entries);
  return (
    <div className="gutter overflow-hidden pb-2">
      <Lines entries={entries.slice(-LINES_CLOSED)} from={Math.max(0, entries.length - LINES_CLOSED)} above={0} below={0} />
    </div>
  );
}

function OpenTable() {
  const { store } = useBenchCore().wireView;
  const entries = useStore(store, (state) => state.entries);
  const isPaused = useStore(store, (state) => state.isPaused);
  const sight = useStore(store, (state) => state.sight);
  const box = useRef<HTMLDivElement>(null);
  // Rows are of one height, so which ones are in sight is a division.
  const [topRow, setTopRow] = useState(0);
  const follows = !isPaused && sight === null;
  useEffect(() => {
    if (follows) box.current?.scrollTo({ top: box.current.scrollHeight });
  }, [follows, entries]);
  useEffect(() => {
    if (sight !== null) box.current?.scrollTo({ top: sight.index * ROW_PX - box.current.clientHeight / 2 });
  }, [sight]);
  const first = Math.max(0, Math.min(topRow, entries.length - ROWS_IN_SIGHT) - ROWS_AROUND);
  const last = Math.min(entries.length, first + ROWS_IN_SIGHT + 2 * ROWS_AROUND) - 1;
  return (
    <div ref={box} onScroll={(event) => setTopRow(Math.floor(event.currentTarget.scrollTop / ROW_PX))} className="gutter max-h-[40dvh] overflow-auto pb-2" tabIndex={0} role="region" aria-label="Exchanges">
      <Lines entries={entries.slice(first, last + 1)} from={first} above={first * ROW_PX} below={(entries.length - 1 - last) * ROW_PX} />
    </div>
  );
}

type LinesProps = { readonly entries: readonly WireEntry[]; readonly from: number; readonly above: number; readonly below: number };

function Lines({ entries, from, above, below }: LinesProps) {
  const { store } = useBenchCore().wireView;
  const stretch = useStore(store, (state) => state.stretch);
  const sightIndex = useStore(store, (state) => state.sight?.index ?? -1);
  const hasHit = useStore(store, (state) => state.hit >= 0);
  return (
    <table className="figure w-full text-left whitespace-nowrap text-muted">
      <caption className="sr-only">The exchanges in sight</caption>
      <thead className="sr-only"><tr><th scope="col">Time</th><th scope="col">Direction</th><th scope="col">Text</th><th scope="col">Hex</th><th scope="col">Took</th></tr></thead>
      {above > 0 ? <tbody aria-hidden><tr><td style={{ height: above }} /></tr></tbody> : null}
      <tbody data-lines>
        {entries.map((entry, index) => (
          <Line key={entry.number} entry={entry} isMarked={isInStretch(entry, stretch) || (hasHit && from + index === sightIndex)} />
        ))}
      </tbody>
      {below > 0 ? <tbody aria-hidden><tr><td style={{ height: below }} /></tr></tbody> : null}
    </table>
  );
}

const Line = memo(function Line({ entry, isMarked }: { readonly entry: WireEntry; readonly isMarked: boolean }) {
  const [arrow, word] = ARROWS[entry.direction];
  return (
    <tr aria-current={isMarked || undefined} className={classNames("h-5", isMarked && "bg-[color-mix(in_srgb,var(--lamp)_18%,transparent)] text-text")}>
      <td className="pr-3">{clockTime(entry.wallMs)}</td>
      <td className="pr-3 text-signal">{arrow}<span className="sr-only">{word}</span></td>
      <td className="pr-6 text-text">{entry.note === undefined ? entry.text : `${entry.text} (${entry.note})`}</td>
      <td className="hidden pr-6 md:table-cell">{hexOf(entry.bytes)}</td>
      <td className="text-right">{entry.tookMs === undefined ? "" : formatFigure(entry.tookMs, "ms", { decimals: 0 })}</td>
    </tr>
  );
});
