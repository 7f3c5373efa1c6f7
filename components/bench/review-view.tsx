"use client";

import { Button } from "@/components/ui/button";
import { Checkbox } from "@/components/ui/checkbox";
import { inputLook } from "@/components/ui/field";
import { FootBar } from "@/components/ui/foot-bar";
import { DemoNote, PageHead } from "@/components/ui/page-head";
import { formatCount, formatFigure, formatNumber } from "@/components/ui/figures";
import { groupFindings, staysAsItIs } from "@/components/bench/finding-groups";
import { FindingList } from "@/components/bench/finding-list";
import { ReviewTable } from "@/components/bench/review-table";
import { reviewGroups } from "@/components/bench/review-rows";
import { useBench, useBenchAccount, useBenchActions, useSettled } from "@/components/bench/bench-provider";
import type { BenchReview, BenchTarget } from "@/components/bench/store/types";
import type { Planned } from "@/lib/serial/plan/types";

/** Seconds that a trial waits for a Keep; the run takes 10 to 120. */
const COUNTDOWNS = [10, 30, 60, 120];

function titleOf(target: BenchTarget): string {
  if (target.kind === "edits") return "Your changes";
  return target.title;
}

function aboveOf(target: BenchTarget, device: string): string {
  if (target.kind === "profile" && target.forSlot !== undefined) return `A mode to try on ${device}`;
  if (target.kind === "profile") return `Apply ${target.revisionNumber === null ? "a file" : `revision ${target.revisionNumber}`} to ${device}`;
  return target.kind === "restore" ? `Restore to ${device}` : `Plan for ${device}`;
}

function headOf(review: BenchReview): string {
  const stops = review.planned.findings.filter((finding) => finding.severity === "stop").length;
  if (stops > 0) return stops === 1 ? "One thing must change" : `${stops} things must change`;
  return review.planned.findings.length === 0 ? "Everything fits" : "What to know";
}

/** Everything that a plan would do, before a byte is written. */
export function ReviewView({ review }: { readonly review: BenchReview }) {
  const device = useBench((state) => state.device);
  const reading = useBench((state) => state.reading);
  const { acknowledge, takeRemedy } = useBenchActions();
  if (!device || !reading) return null;
  const { planned, target } = review;
  const name = device.stored?.name ?? `${device.identity.maker} ${device.identity.model}`;
  const groups = reviewGroups(reading.content.document, planned, device);
  return (
    <div className="flex flex-1 flex-col">
      <div className="gutter grid gap-x-11 pb-8 lg:grid-cols-[minmax(0,1fr)_392px]">
        <div className="min-w-0">
          <PageHead above={aboveOf(target, name)} title={titleOf(target)} lead={leadOf(review, device.driver.memory.volatileWrites)} />
          {groups.length === 0 ? <p className="border-t border-line py-6">Nothing would change: the device holds these values already.</p> : <ReviewTable groups={groups} />}
          <ByHand review={review} />
        </div>
        <aside aria-labelledby="findings-head" className="pt-7">
          <h2 id="findings-head" className="text-xl">{headOf(review)}</h2>
          <FindingList findings={planned.findings} acknowledged={review.acknowledged} onAcknowledge={acknowledge} onRemedy={takeRemedy} canSetValues={target.kind !== "restore"} changedKeys={changedKeysOf(planned)} />
          <SlotsLeftOut review={review} />
          <p className="mt-3 border-t border-line pt-3 text-sm text-muted">A signal above or below a CRT&apos;s range can damage its deflection stage. The set&apos;s service literature decides, before any figure here.</p>
          {device.kind === "simulated" ? <div className="mt-3"><DemoNote>This device is simulated: what it shows proves the plan, not the hardware.</DemoNote></div> : null}
        </aside>
      </div>
      <ReviewFoot review={review} />
    </div>
  );
}

function leadOf({ planned }: BenchReview, volatileWrites: boolean): string {
  const changes = `${formatCount(planned.changes.length, "value changes", "values change")}; ${formatNumber(planned.unchangedCount)} already match and stay as they are.`;
  const memory = volatileWrites
    ? "nothing reaches its non-volatile memory until you keep it"
    : "this device stores each write at once: putting back writes the former values again";
  return `${changes} The device is backed up first, and ${memory}.`;
}

function ByHand({ review }: { readonly review: BenchReview }) {
  const byHand = review.planned.plan?.byHand ?? [];
  const driver = useBench((state) => state.device?.driver);
  if (byHand.length === 0 || !driver) return null;
  return (
    <section aria-labelledby="by-hand-head" className="mt-6">
      <h2 id="by-hand-head" className="text-xl">To set on the device by hand</h2>
      <p className="text-muted">These can&apos;t be read back, so Backporch doesn&apos;t write them.</p>
      <ul className="mt-2 list-disc pl-5">{byHand.map((one) => <li key={one.key}>{one.label}: <span className="figure">{one.value}</span></li>)}</ul>
    </section>
  );
}

function SlotsLeftOut({ review }: { readonly review: BenchReview }) {
  const { leaveOut } = useBenchActions();
  if (review.target.kind === "edits") return null;
  const content = review.target.kind === "profile" ? review.target.document : review.target.content.document;
  const slots = content.slots ?? [];
  if (slots.length === 0) return null;
  return (
    <fieldset className="border-t border-line pt-3">
      <legend className="float-left mb-1 w-full font-strong">Slots to write</legend>
      <div className="clear-both grid grid-cols-2 gap-x-4">
        {slots.map((slot) => (
          <Checkbox key={slot.number} label={`${slot.number} ${slot.name ?? ""}`} checked={!review.leftOut.includes(slot.number)} onChange={(on) => leaveOut(slot.number, !on)} />
        ))}
      </div>
    </fieldset>
  );
}

const changedKeysOf = ({ changes }: Planned) => changes.map((change) => change.key);

/** How many boxes of the list acknowledge what is open: what says the same has one. */
function boxesOf(planned: Planned, open: readonly string[]): number {
  const changedKeys = changedKeysOf(planned);
  const groups = groupFindings(planned.findings, (finding) => staysAsItIs(finding, changedKeys));
  return groups.filter(({ severity, keys }) => severity === "caution" && keys.some((key) => open.includes(key))).length;
}

function blockedBy(review: BenchReview, hasScreen: boolean, isLive: boolean): string | null {
  const stops = review.planned.findings.filter((finding) => finding.severity === "stop");
  if (!isLive) return "the device must be connected.";
  if (!hasScreen) return "choose the screen, or state that it is unknown.";
  const first = stops[0];
  if (first) return stops.length === 1 ? first.sentence : `${first.sentence} And ${formatCount(stops.length - 1, "more stop", "more stops")}.`;
  const open = review.planned.toAcknowledge.filter((key) => !review.acknowledged.includes(key));
  if (open.length > 0) return `read ${formatCount(boxesOf(review.planned, open), "caution", "cautions")} first.`;
  return review.planned.changes.length === 0 ? "nothing would change." : null;
}

function ReviewFoot({ review }: { readonly review: BenchReview }) {
  const hasScreen = useBench((state) => state.screen.kind !== "none");
  const isLive = useBench((state) => state.link.name === "ready");
  const { backUpAndTry, closeReview, acceptUnknownScreen, setCountdown } = useBenchActions();
  const account = useBenchAccount();
  const isFree = useSettled();
  const progress = useBench((state) => state.progress);
  const { plan } = review.planned;
  const why = blockedBy(review, hasScreen, isLive);
  return (
    <FootBar
      status={progress !== null ? <span className="figure">Backing up: {progress.done} of {progress.total} settings, {formatFigure(progress.secondsLeft, "s", { decimals: 1 })} left</span> : why === null ? <><span className="font-strong">Ready.</span> <span className="text-muted">{account ? "The backup is stored first." : "Without an account the backup stays in this page."}</span></> : <><span className="font-strong">Not yet:</span> <span className="text-muted">{why}</span></>}
      cost={plan ? `${formatCount(plan.steps.length, "step", "steps")}  ${formatFigure(plan.bytes, "bytes")}  ${formatFigure(plan.seconds, "s", { decimals: 1 })}` : undefined}
    >
      <label className="flex items-center gap-2">
        <span className="text-muted">Trial</span>
        <select aria-label="Length of the trial" className={`${inputLook} min-w-20`} value={review.countdownSeconds} onChange={(event) => setCountdown(Number(event.target.value))}>
          {COUNTDOWNS.map((seconds) => <option key={seconds} value={seconds}>{seconds} s</option>)}
        </select>
      </label>
      {hasScreen ? null : <Button onClick={acceptUnknownScreen}>The screen is unknown, I accept that</Button>}
      <Button onClick={closeReview}>Back to the bench</Button>
      <Button kind="primary" disabled={why !== null || plan === null || !isFree} onClick={() => void backUpAndTry()}>Back up and try</Button>
    </FootBar>
  );
}
