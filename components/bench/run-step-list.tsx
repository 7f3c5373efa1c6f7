"use client";

import { useState } from "react";
import { Button } from "@/components/ui/button";
import { formatCount } from "@/components/ui/figures";
import { useBench, useBenchCore } from "@/components/bench/bench-provider";
import { runSteps } from "@/components/bench/run-steps";
import type { BenchRun } from "@/components/bench/store/types";

/** Every request of a run, each with a way to its bytes in the wire log. */
export function RunStepList({ run }: { readonly run: BenchRun }) {
  // A run tells of each request, some hundred times in a whole read: the list is made only while somebody looks at it.
  const [isOpen, setOpen] = useState(false);
  const count = new Set(run.journal.flatMap((entry) => (entry.kind === "request" ? [entry.number] : []))).size;
  if (count === 0) return null;
  return (
    <details className="mt-2 text-sm" onToggle={(event) => setOpen(event.currentTarget.open)}>
      <summary className="cursor-pointer text-muted">{formatCount(count, "request", "requests")} of this run</summary>
      {isOpen ? <Steps run={run} /> : null}
    </details>
  );
}

function Steps({ run }: { readonly run: BenchRun }) {
  const driver = useBench((state) => state.device?.driver);
  const { wireLog, wireView } = useBenchCore();
  if (!driver) return null;
  const oldestMs = wireLog.entries()[0]?.wallMs ?? Infinity;
  return (
    <ol aria-label="Requests of this run" tabIndex={0} className="mt-1 max-h-48 overflow-y-auto">
      {runSteps(run.journal, driver).map((step) => (
        <li key={step.number} className="flex items-baseline gap-3 border-t border-line py-1">
          <span className="min-w-0 flex-1">{step.what}</span>
          <span className="text-muted">{step.outcome}</span>
          {step.stretch.fromMs >= oldestMs ? <Button size="small" onClick={() => wireView.showStretch(step.stretch)} aria-label={`Bytes of: ${step.what}`}>Bytes</Button> : null}
        </li>
      ))}
    </ol>
  );
}
