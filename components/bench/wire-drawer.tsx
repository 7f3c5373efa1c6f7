"use client";

import { useEffect, useRef } from "react";
import { useStore } from "zustand";
import { ChevronDown, ChevronUp } from "lucide-react";
import { Button } from "@/components/ui/button";
import { formatNumber } from "@/components/ui/figures";
import { useBenchCore } from "@/components/bench/bench-provider";
import { WireTable } from "@/components/bench/wire-table";
import { WireTools } from "@/components/bench/wire-tools";

/** What went over the wire: a drawer at the foot, text and hex side by side. */
export function WireDrawer() {
  const { wireView } = useBenchCore();
  const { store, setOpen, follow } = wireView;
  const isOpen = useStore(store, (state) => state.isOpen);
  const total = useStore(store, (state) => state.total);
  const sight = useStore(store, (state) => state.sight);
  const drawer = useRef<HTMLElement>(null);
  useEffect(() => follow(), [follow]);
  useEffect(() => {
    if (sight !== null) drawer.current?.scrollIntoView({ block: "end" });
  }, [sight]);
  return (
    <section ref={drawer} aria-labelledby="wire-head" className="border-t border-line bg-sunk">
      <div className="gutter flex flex-wrap items-center gap-x-4 gap-y-2 py-2">
        <h2 id="wire-head" className="text-[15px]">Wire log</h2>
        <span className="figure text-muted">{formatNumber(total)} exchanges</span>
        <span className="flex-1" />
        <Button size="small" aria-expanded={isOpen} icon={isOpen ? <ChevronDown aria-hidden size={15} /> : <ChevronUp aria-hidden size={15} />} onClick={() => setOpen(!isOpen)}>{isOpen ? "Close" : "Open"}</Button>
      </div>
      {isOpen ? <WireTools /> : null}
      <WireTable isOpen={isOpen} />
    </section>
  );
}
