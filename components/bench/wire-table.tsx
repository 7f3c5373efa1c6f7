"use client";

import { memo, useEffect, useEffectEvent, useRef } from "react";
import { useStore } from "zustand";
import { useVirtualizer } from "@tanstack/react-virtual";
import { formatFigure } from "@/components/ui/figures";
import { classNames } from "@/components/ui/class-names";
import { hexOf, type WireEntry } from "@/lib/serial/wire-log";
import { useBenchCore } from "@/components/bench/bench-provider";
import { isInStretch } from "@/components/bench/wire-view";

/** px: the line height of figures. */
const ROW_PX = 20;
/** Rows drawn above and below what is in sight, so that a page read aloud or searched by the browser has some. */
const ROWS_AROUND = 60;
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
  const rows = useVirtualizer({ count: entries.length, getScrollElement: () => box.current, estimateSize: () => ROW_PX, overscan: ROWS_AROUND });
  const follows = !isPaused && sight === null;
  useEffect(() => {
    if (follows) box.current?.scrollTo({ top: box.current.scrollHeight });
  }, [follows, entries]);
  const bringIntoSight = useEffectEvent((index: number) => rows.scrollToIndex(index, { align: "center" }));
  useEffect(() => {
    if (sight !== null) bringIntoSight(sight.index);
  }, [sight]);
  const drawn = rows.getVirtualItems();
  const first = drawn[0]?.index ?? 0;
  const last = drawn.at(-1)?.index ?? -1;
  return (
    <div ref={box} className="gutter max-h-[40dvh] overflow-auto pb-2" tabIndex={0} role="region" aria-label="Exchanges">
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
    <tr aria-current={isMarked || undefined} className={classNames("h-5", isMarked && "bg-[color-mix(in_srgb,var(--lamp)_18%,transparent)]")}>
      <td className="pr-3">{clockTime(entry.wallMs)}</td>
      <td className="pr-3 text-signal">{arrow}<span className="sr-only">{word}</span></td>
      <td className="pr-6 text-text">{entry.note === undefined ? entry.text : `${entry.text} (${entry.note})`}</td>
      <td className="hidden pr-6 md:table-cell">{hexOf(entry.bytes)}</td>
      <td className="text-right">{entry.tookMs === undefined ? "" : formatFigure(entry.tookMs, "ms", { decimals: 0 })}</td>
    </tr>
  );
});
