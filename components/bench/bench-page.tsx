"use client";

import { Bench } from "@/components/bench/bench";
import { useHasBench } from "@/components/bench/bench-provider";
import type { Incoming } from "@/components/bench/use-incoming";

/** The bench once the page runs in a browser; before that, what it is for. */
export function BenchPage({ incoming }: { readonly incoming: Incoming }) {
  const hasBench = useHasBench();
  if (hasBench) return <Bench incoming={incoming} />;
  return (
    <div className="gutter py-10">
      <h1 className="text-3xl tracking-[-0.02em]">Bench</h1>
      <p className="mt-2 text-muted">Getting the bench ready…</p>
      <noscript><p className="mt-2">The bench talks to a serial port from this page, which needs JavaScript.</p></noscript>
    </div>
  );
}
