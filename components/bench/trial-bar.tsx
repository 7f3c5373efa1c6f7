"use client";

import { Button } from "@/components/ui/button";
import { StopIcon } from "@/components/ui/finding-icon";
import { formatCount, formatCountdown } from "@/components/ui/figures";
import { useBench, useBenchActions } from "@/components/bench/bench-provider";
import { RunStepList } from "@/components/bench/run-step-list";
import { runWords } from "@/components/bench/run-words";
import { StandingTable } from "@/components/bench/standing-table";
import { formatMoment } from "@/components/ui/moments";
import { useSecondsLeft } from "@/components/bench/use-seconds-left";
import type { BenchRun } from "@/components/bench/store/types";

/** A run, from its first byte to its last word: full width under the chain, the countdown the largest thing on the page. */
export function TrialBar() {
  const run = useBench((state) => state.run);
  if (!run) return null;
  const { view } = run;
  const isTrouble = view.state === "unconfirmed" || view.state === "mixed" || view.link === "lost";
  return (
    <section
      aria-label="Trial" data-run-state={view.state}
      className={`gutter sticky top-0 z-30 border-y py-3 ${isTrouble ? "border-halt" : "border-lamp"} bg-[color-mix(in_srgb,var(--lamp)_14%,var(--bg))]`}
    >
      <div className="flex flex-wrap items-center gap-x-5 gap-y-3">
        {view.countdown !== null ? <Countdown endsAtMs={view.countdown.endsAtMs} /> : isTrouble ? <StopIcon className="size-6" /> : null}
        <div className="min-w-[min(100%,20rem)] flex-1" aria-live="polite">
          <RunText run={run} />
        </div>
        <RunActs run={run} />
      </div>
      {view.state === "trying" && view.link === "up" ? <LookList run={run} /> : null}
      <RunStepList run={run} />
      {view.standings.length > 0 ? <StandingTable standings={view.standings} /> : null}
    </section>
  );
}

function Countdown({ endsAtMs }: { readonly endsAtMs: number }) {
  const seconds = useSecondsLeft(endsAtMs);
  return <span role="timer" aria-label="Time left to keep" className="figure text-[64px] leading-none text-lamp md:text-[34px]">{formatCountdown(seconds)}</span>;
}

function RunText({ run }: { readonly run: BenchRun }) {
  const words = runWords(run);
  return (
    <>
      <div className="text-lg font-strong">{words.title}</div>
      <div className="text-muted">{words.detail}</div>
      {run.notice === null ? null : <div className="mt-1 font-strong">{run.notice}</div>}
    </>
  );
}

function RunActs({ run }: { readonly run: BenchRun }) {
  const actions = useBenchActions();
  const { busy, state, lastWriteAtMs, link } = run.view;
  if (link === "lost") return null;
  switch (state) {
    case "writing":
    case "keeping":
      return <Button onClick={actions.putBack}>Stop and put back</Button>;
    case "trying":
      return (
        <div className="flex w-full gap-3 sm:w-auto">
          <Button kind="primary" size="large" className="flex-1 whitespace-nowrap" disabled={busy} onClick={actions.keep}>Keep</Button>
          <Button size="large" className="flex-1 whitespace-nowrap" onClick={actions.putBack}>Put back</Button>
        </div>
      );
    case "unconfirmed":
    case "mixed":
      return (
        <div className="flex flex-wrap gap-3">
          <Button kind="primary" disabled={busy} onClick={actions.finish}>Finish</Button>
          <Button disabled={busy} onClick={actions.putBack}>Put back</Button>
          <Button disabled={busy} onClick={actions.readRunAgain}>Read again</Button>
          {state === "unconfirmed" && lastWriteAtMs !== null ? (
            <Button disabled={busy} onClick={actions.stateCycled}>I switched it off and on after {formatMoment(new Date(lastWriteAtMs))}</Button>
          ) : null}
          <Button kind="quiet" disabled={busy} onClick={actions.leaveRun}>Leave it as it is</Button>
        </div>
      );
    case "ready":
    case "putting-back":
      return null;
    default:
      return <Button onClick={actions.dismissRun}>Close</Button>;
  }
}

function LookList({ run }: { readonly run: BenchRun }) {
  const { look } = useBenchActions();
  if (run.changedSlots.length === 0) return null;
  const unseen = run.view.notLookedAt;
  return (
    <div className="mt-2 flex flex-wrap items-center gap-2.5 text-sm">
      <span className="text-muted">Look at:</span>
      {run.changedSlots.map((slot) => (
        <Button key={slot} size="small" disabled={run.view.busy} onClick={() => look(slot)}>Slot {slot}{unseen.includes(slot) ? "" : ", seen"}</Button>
      ))}
      {unseen.length === 0 ? null : <span>{formatCount(unseen.length, "changed slot was", "changed slots were")} not looked at: {unseen.join(", ")}.</span>}
    </div>
  );
}
