"use client";

import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { FindingList } from "@/components/bench/finding-list";
import { useBench, useBenchActions } from "@/components/bench/bench-provider";

/** A recall that a check holds back, or that asks first. No button leads past a stop. */
export function HeldRecall() {
  const held = useBench((state) => state.heldRecall);
  const hasScreen = useBench((state) => state.screen.kind !== "none");
  const { dropRecall, recallAnyway } = useBenchActions();
  if (!held) return null;
  const isStopped = held.findings.some((finding) => finding.severity === "stop");
  const description = isStopped ? "Its signal is outside what the screen takes, so it was not recalled."
    : hasScreen ? "Read this first." : "No screen is chosen, so its signal was checked against none.";
  return (
    <Dialog
      open onOpenChange={(open) => { if (!open) dropRecall(); }} title={`Recall slot ${held.slot}`} description={description}
      foot={<><Button onClick={dropRecall}>Stay on this slot</Button>{isStopped ? null : <Button kind="primary" onClick={() => void recallAnyway()}>Recall slot {held.slot}</Button>}</>}
    >
      <FindingList findings={held.findings} />
      {hasScreen ? null : <p className="pt-2">Leave the screen unplugged, or choose it on the bench first.</p>}
    </Dialog>
  );
}
