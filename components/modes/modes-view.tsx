"use client";

import { useState } from "react";
import { Button } from "@/components/ui/button";
import { CautionIcon } from "@/components/ui/finding-icon";
import { HeadPickers } from "@/components/modes/head-pickers";
import { MiddleColumn } from "@/components/modes/middle-column";
import { ModelineDialog } from "@/components/modes/modeline-dialog";
import { ModesProvider, useModes } from "@/components/modes/modes-context";
import { ModesFoot } from "@/components/modes/modes-foot";
import { PlaneColumn } from "@/components/modes/plane-column";
import { toQuery, type ModesQuery } from "@/components/modes/store/link";
import { useCopy } from "@/components/ui/use-copy";
import { StartFromBench } from "@/components/modes/start-from-bench";
import { useOwnScreen } from "@/components/modes/use-own-screen";
import { WantedColumn } from "@/components/modes/wanted-column";
import { WaveformEditor } from "@/components/modes/waveform-editor";

/** Make a mode: from lines, refresh and a screen to a raster that runs. The address holds everything. */
export function ModesView({ query }: { readonly query: ModesQuery }) {
  const isFresh = Object.keys(query).length === 0;
  return (
    <ModesProvider query={query}>
      {(problems) => (
        <>
          {isFresh ? <StartFromBench /> : null}
          <ModesPage problems={problems} />
        </>
      )}
    </ModesProvider>
  );
}

function ModesPage({ problems }: { readonly problems: readonly string[] }) {
  const timing = useModes((state) => state.answer?.hand?.timing ?? null);
  const screenProblem = useOwnScreen();
  return (
    <div className="flex flex-1 flex-col">
      <div className="gutter flex flex-wrap items-end justify-between gap-x-8 gap-y-2 pb-3 pt-5">
        <div className="flex flex-wrap items-baseline gap-x-4 gap-y-1">
          <h1 className="text-3xl tracking-[-0.02em]">Make a mode</h1>
          <HeadActs />
        </div>
        <HeadPickers />
      </div>
      <LinkProblems problems={screenProblem === null ? problems : [...problems, screenProblem]} />
      {timing === null ? null : <WaveformEditor timing={timing} />}
      <div className="grid flex-1 grid-cols-1 lg:grid-cols-[288px_minmax(0,1fr)] xl:grid-cols-[288px_minmax(0,1fr)_380px]">
        <WantedColumn />
        <MiddleColumn />
        <div className="min-w-0 lg:max-xl:col-span-2">
          <PlaneColumn />
        </div>
      </div>
      <ModesFoot />
    </div>
  );
}

/** What brings a raster here from elsewhere, and this page to others. */
function HeadActs() {
  const [open, setOpen] = useState(false);
  const copy = useCopy();
  const query = useModes((state) => toQuery(state.choices));
  return (
    <span className="flex gap-1">
      <Button size="small" kind="quiet" onClick={() => setOpen(true)}>
        Paste a modeline
      </Button>
      <Button
        size="small"
        kind="quiet"
        onClick={() => copy(`${location.origin}${location.pathname}?${query}`, "link to this page")}
      >
        Copy link
      </Button>
      <ModelineDialog open={open} onClose={() => setOpen(false)} />
    </span>
  );
}

function LinkProblems({ problems }: { readonly problems: readonly string[] }) {
  const [isRead, setRead] = useState(false);
  if (problems.length === 0 || isRead) return null;
  return (
    <div
      role="status"
      className="gutter flex flex-wrap items-start justify-between gap-3 border-y border-line bg-sunk py-2.5"
    >
      <div className="flex gap-2">
        <CautionIcon className="mt-[3px]" />
        <ul>
          {problems.map((problem) => (
            <li key={problem}>{problem}</li>
          ))}
        </ul>
      </div>
      <Button size="small" kind="quiet" onClick={() => setRead(true)}>
        Close
      </Button>
    </div>
  );
}
