"use client";

import { useState } from "react";
import { ChevronDown, ChevronUp } from "lucide-react";
import { Button } from "@/components/ui/button";
import { Checkbox } from "@/components/ui/checkbox";
import { TextField } from "@/components/ui/field";
import { formatFigure, formatNumber } from "@/components/ui/figures";
import { useBenchCore } from "@/components/bench/bench-provider";
import { downloadRecording } from "@/components/bench/save-recording";
import { useWireLines } from "@/components/bench/use-wire-lines";
import type { WireLine } from "@/components/bench/wire-lines";

/** How many of the ring's last exchanges are drawn; the filter looks through all of them. */
const LINES_SHOWN = 200;

/** What went over the wire: a drawer at the foot, text and hex side by side. */
export function WireDrawer() {
  const [isOpen, setOpen] = useState(false);
  const [filter, setFilter] = useState("");
  const [strikeOut, setStrikeOut] = useState(true);
  const core = useBenchCore();
  const { lines, total } = useWireLines(isOpen ? filter : "", isOpen ? LINES_SHOWN : 3);
  return (
    <section aria-labelledby="wire-head" className="border-t border-line bg-sunk">
      <div className="gutter flex flex-wrap items-center gap-x-4 gap-y-2 py-2">
        <h2 id="wire-head" className="text-[15px]">Wire log</h2>
        <span className="figure text-muted">{formatNumber(total)} exchanges</span>
        <span className="flex-1" />
        {isOpen ? (
          <>
            <Checkbox label="Strike out names and serial numbers" checked={strikeOut} onChange={setStrikeOut} />
            <Button size="small" onClick={() => downloadRecording(core, strikeOut)}>Save a recording</Button>
          </>
        ) : null}
        <Button size="small" aria-expanded={isOpen} icon={isOpen ? <ChevronDown aria-hidden size={15} /> : <ChevronUp aria-hidden size={15} />} onClick={() => setOpen(!isOpen)}>{isOpen ? "Close" : "Open"}</Button>
      </div>
      {isOpen ? <div className="gutter pb-2"><TextField label="Filter" placeholder="HPOS" value={filter} onChange={(event) => setFilter(event.target.value)} fieldClassName="max-w-[260px]" /></div> : null}
      <WireTable lines={lines} isOpen={isOpen} />
    </section>
  );
}

function WireTable({ lines, isOpen }: { readonly lines: readonly WireLine[]; readonly isOpen: boolean }) {
  return (
    <div className={`gutter pb-2 ${isOpen ? "max-h-[40dvh] overflow-auto" : "overflow-hidden"}`} tabIndex={isOpen ? 0 : undefined} aria-label={isOpen ? "Exchanges" : undefined} role={isOpen ? "region" : undefined}>
      <table className="figure w-full text-left whitespace-nowrap text-muted">
        <caption className="sr-only">The last exchanges</caption>
        <thead className="sr-only"><tr><th scope="col">Time</th><th scope="col">Direction</th><th scope="col">Text</th><th scope="col">Hex</th><th scope="col">Took</th></tr></thead>
        <tbody>
          {lines.map((line) => (
            <tr key={line.id}>
              <td className="pr-3">{line.time}</td>
              <td className="pr-3 text-signal">{line.direction === "out" ? "→" : line.direction === "in" ? "←" : "·"}<span className="sr-only">{line.direction === "out" ? "sent" : line.direction === "in" ? "received" : "event"}</span></td>
              <td className="pr-6 text-text">{line.text}</td>
              <td className="hidden pr-6 md:table-cell">{line.hex}</td>
              <td className="text-right">{line.tookMs === null ? "" : formatFigure(line.tookMs, "ms", { decimals: 0 })}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
