"use client";

import { useEffect, useState } from "react";
import { BackupBar } from "@/components/bench/backup-bar";
import { BenchChain } from "@/components/bench/bench-chain";
import { ConnectPanel } from "@/components/bench/connect-panel";
import { DriverNotice } from "@/components/bench/driver-notice";
import { HeldRecall } from "@/components/bench/held-recall";
import { LinkNotice } from "@/components/bench/link-notice";
import { ReviewView } from "@/components/bench/review-view";
import { ScreenColumn } from "@/components/bench/screen-column";
import { SettingsColumn } from "@/components/bench/settings-column";
import { SlotsColumn } from "@/components/bench/slots-column";
import { TrialBar } from "@/components/bench/trial-bar";
import { UnplugCaution } from "@/components/bench/unplug-caution";
import { WireDrawer } from "@/components/bench/wire-drawer";
import type { Reach } from "@/lib/profile/also-moved";
import { useBench } from "@/components/bench/bench-provider";
import { useIncoming, type Incoming } from "@/components/bench/use-incoming";

/** The bench: one device, everything it holds, and what its signal does. */
export function Bench({ incoming }: { readonly incoming: Incoming }) {
  const isConnected = useBench((state) => state.device !== null);
  const review = useBench((state) => state.review);
  const runState = useBench((state) => state.run?.view.state ?? null);
  const waiting = useIncoming(incoming);
  // While a run is open the bench itself is in sight: the picture is what the owner looks at.
  const isReviewing = review !== null && runState === null;
  // Where the owner was stays over a review.
  const [chosen, setChosen] = useState<number | null>(null);
  const [reach, setReach] = useState<Reach>("slot");
  const view = isReviewing ? "review" : runState === null ? "bench" : "run";
  // Another view begins at its top: a review with what stops it, a run with the picture.
  useEffect(() => {
    if (view !== "bench") window.scrollTo({ top: 0 });
  }, [view]);
  return (
    <div className="flex flex-1 flex-col">
      {waiting === null ? null : <p role="status" className="gutter border-b border-line bg-sunk py-2.5">{waiting}</p>}
      {isConnected ? (
        <>
          <BenchChain />
          <LinkNotice />
          <DriverNotice />
          <UnplugCaution />
          <TrialBar />
          {isReviewing ? <ReviewView review={review} /> : <BenchColumns chosen={chosen} onChoose={setChosen} reach={reach} onReach={setReach} />}
          <WireDrawer />
        </>
      ) : <ConnectPanel />}
      <HeldRecall />
    </div>
  );
}

type ColumnsProps = { readonly chosen: number | null; readonly onChoose: (slot: number) => void; readonly reach: Reach; readonly onReach: (reach: Reach) => void };

function BenchColumns({ chosen, onChoose, reach, onReach }: ColumnsProps) {
  const activeSlot = useBench((state) => state.reading?.activeSlot);
  const firstSlot = useBench((state) => state.device?.limits.firstSlot ?? 1);
  const slot = chosen ?? activeSlot ?? firstSlot;
  return (
    <div className="grid flex-1 lg:grid-cols-[minmax(400px,452px)_minmax(0,1fr)] xl:grid-cols-[452px_minmax(0,1fr)_352px]">
      <div className="gutter border-line py-4 lg:border-r">
        <h1 className="sr-only">Bench</h1>
        <SlotsColumn chosen={slot} onChoose={onChoose} />
        <BackupBar />
      </div>
      <div className="gutter border-line py-4 xl:border-r"><ScreenColumn /></div>
      <div className="gutter border-line py-4 max-xl:border-t lg:max-xl:col-span-2"><SettingsColumn slot={slot} reach={reach} onReach={onReach} /></div>
    </div>
  );
}
