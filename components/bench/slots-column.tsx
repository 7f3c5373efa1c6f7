"use client";

import { Button } from "@/components/ui/button";
import { ChangedRing } from "@/components/ui/finding-icon";
import { classNames } from "@/components/ui/class-names";
import { ModeMark } from "@/components/video/mode-glyph";
import { Tape } from "@/components/video/tape";
import { slotLines, type SlotLine } from "@/components/bench/slot-lines";
import { useBench, useBenchActions } from "@/components/bench/bench-provider";

/** Every slot of the device on tape, with its mode; the active one is marked, any filled one can be recalled. */
export function SlotsColumn({ chosen, onChoose }: { readonly chosen: number; readonly onChoose: (slot: number) => void }) {
  const device = useBench((state) => state.device);
  const reading = useBench((state) => state.reading);
  const backup = useBench((state) => state.backup);
  if (!device || !reading) return null;
  const lines = slotLines(reading, device.limits, backup?.content.document ?? null);
  return (
    <section aria-labelledby="slots-head">
      <div className="mb-1 flex items-baseline justify-between gap-3">
        <h2 id="slots-head" className="text-xl">Slots</h2>
        {lines.some((line) => line.changed) ? (
          <span className="text-sm text-muted"><ChangedRing className="mr-1.5" />changed since the last backup</span>
        ) : null}
      </div>
      <ul>
        {lines.map((line) => <SlotRow key={line.number} line={line} isChosen={line.number === chosen} onChoose={onChoose} />)}
      </ul>
    </section>
  );
}

function SlotRow({ line, isChosen, onChoose }: { readonly line: SlotLine; readonly isChosen: boolean; readonly onChoose: (slot: number) => void }) {
  const { askRecall } = useBenchActions();
  const isFree = useBench((state) => state.activity === "idle" && state.link.name === "ready");
  return (
    <li className={classNames("grid grid-cols-[18px_minmax(0,1fr)_64px] items-center gap-x-2.5 sm:grid-cols-[18px_minmax(0,1fr)_112px_64px] border-l-3 py-1.5 pl-2", line.active ? "border-lamp" : "border-transparent", isChosen && "bg-surface")}>
      <span className={classNames("figure", line.active ? "text-lamp" : "text-muted")}>{line.number}</span>
      <button
        type="button" aria-pressed={isChosen} onClick={() => onChoose(line.number)}
        aria-label={`Slot ${line.number}, ${line.name === "" ? "empty" : line.name}${line.active ? ", active" : ""}`}
        className="min-w-0 text-left"
      >
        <Tape name={line.name} className="w-full" />
      </button>
      <span className="order-last col-start-2 flex items-center gap-1.5 sm:order-none sm:col-start-auto">
        {line.changed ? <><ChangedRing /><span className="sr-only">changed</span></> : null}
        {line.timing === null ? null : <ModeMark timing={line.timing} stacked />}
      </span>
      {line.timing === null || line.active ? (
        <span className="text-center text-sm text-muted">{line.active ? "active" : ""}</span>
      ) : (
        <Button size="small" disabled={!isFree} onClick={() => void askRecall(line.number)} aria-label={`Recall slot ${line.number}`}>Recall</Button>
      )}
    </li>
  );
}
