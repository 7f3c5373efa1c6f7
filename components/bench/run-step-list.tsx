"use client";

import { Button } from "@/components/ui/button";
import { formatCount } from "@/components/ui/figures";
import { useBench, useBenchCore } from "@/components/bench/bench-provider";
import { runSteps } from "@/components/bench/run-steps";
import { holdsStretch } from "@/components/bench/wire-view";
import type { BenchRun } from "@/components/bench/store/types";

/** Every request of a run, each with a way to its bytes in the wire log. */
export function RunStepList({ run }: { readonly run: BenchRun }) {
  const driver = useBench((state) => state.device?.driver);
  const { wireLog, wireView } = useBenchCore();
  const steps = driver ? runSteps(run.journal, driver) : [];
  if (steps.length === 0) return null;
  return (
    <details className="mt-2 text-sm">
      <summary className="cursor-pointer text-muted">{formatCount(steps.length, "request", "requests")} of this run</summary>
      <ol aria-label="Requests of this run" tabIndex={0} className="mt-1 max-h-48 overflow-y-auto">
        {steps.map((step) => (
          <li key={step.number} className="flex items-baseline gap-3 border-t border-line py-1">
            <span className="min-w-0 flex-1">{step.what}</span>
            <span className="text-muted">{step.outcome}</span>
            {holdsStretch(wireLog, step.stretch) ? <Button size="small" onClick={() => wireView.showStretch(step.stretch)} aria-label={`Bytes of: ${step.what}`}>Bytes</Button> : null}
          </li>
        ))}
      </ol>
    </details>
  );
}
