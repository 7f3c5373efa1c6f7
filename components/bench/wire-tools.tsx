"use client";

import { useState } from "react";
import { ChevronDown, ChevronUp } from "lucide-react";
import { useStore } from "zustand";
import { Button, IconButton } from "@/components/ui/button";
import { Checkbox } from "@/components/ui/checkbox";
import { TextField } from "@/components/ui/field";
import { formatNumber } from "@/components/ui/figures";
import { useBenchCore } from "@/components/bench/bench-provider";
import { downloadRecording } from "@/components/bench/save-recording";

/** Filter, search, pause and saving of the wire log. */
export function WireTools() {
  const core = useBenchCore();
  const { store, setFilter, setPaused } = core.wireView;
  const [strikeOut, setStrikeOut] = useState(true);
  const filter = useStore(store, (state) => state.filter);
  const isPaused = useStore(store, (state) => state.isPaused);
  const newer = useStore(store, (state) => state.newer);
  return (
    <div className="gutter flex flex-wrap items-end gap-x-4 gap-y-2 pb-2">
      <TextField label="Filter" placeholder="HPOS" value={filter} onChange={(event) => setFilter(event.target.value)} fieldClassName="w-[180px]" />
      <SearchField />
      <Button size="small" aria-pressed={isPaused} className="mb-1" onClick={() => setPaused(!isPaused)}>{isPaused ? "Go on" : "Pause"}</Button>
      <span role="status" className="mb-1.5 min-w-[8ch] text-sm text-muted">{isPaused ? `Paused; ${formatNumber(newer)} newer` : ""}</span>
      <span className="flex-1" />
      <Checkbox label="Strike out names and serial numbers" checked={strikeOut} onChange={setStrikeOut} />
      <Button size="small" className="mb-1" onClick={() => downloadRecording(core, strikeOut)}>Save a recording</Button>
    </div>
  );
}

/** Goes from hit to hit, and holds the log still meanwhile. */
function SearchField() {
  const { store, setSearch, goToHit } = useBenchCore().wireView;
  const hit = useStore(store, (state) => state.hit);
  const search = useStore(store, (state) => state.search);
  const count = useStore(store, (state) => state.matches.length);
  return (
    <form className="flex items-end gap-1.5" onSubmit={(event) => { event.preventDefault(); goToHit(1); }}>
      <TextField label="Search" value={search} onChange={(event) => setSearch(event.target.value)} fieldClassName="w-[180px]" />
      <IconButton label="Hit before" disabled={count === 0} onClick={() => goToHit(-1)}><ChevronUp aria-hidden size={15} /></IconButton>
      <IconButton label="Next hit" type="submit" disabled={count === 0}><ChevronDown aria-hidden size={15} /></IconButton>
      <span role="status" className="mb-1.5 min-w-[9ch] text-sm text-muted">{search.trim() === "" ? "" : count === 0 ? "no hit" : `${hit < 0 ? "" : `${formatNumber(hit + 1)} of `}${formatNumber(count)}`}</span>
    </form>
  );
}
