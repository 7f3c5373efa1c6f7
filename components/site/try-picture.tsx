"use client";

import { useMemo, useState } from "react";
import { lineRatioWords } from "@/components/site/demo-device";
import { classNames } from "@/components/ui/class-names";
import { ModeMark } from "@/components/video/mode-glyph";
import { ScreenCanvas } from "@/components/video/screen-canvas";
import { Tape } from "@/components/video/tape";
import { effectivePicture } from "@/lib/picture/effective-picture";
import { simulateScreen } from "@/lib/picture/simulated-screen";
import type { ProfileDocument } from "@/lib/profile/document";
import { modeName } from "@/lib/timing/mode-name";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";

export type TryPictureProps = {
  readonly deviceName: string;
  readonly document: ProfileDocument;
  readonly source: SourceFormat;
  readonly screen: ScreenEnvelope;
};

type Slot = NonNullable<ProfileDocument["slots"]>[number];

/** Slots of the simulated device on tape; the chosen one's picture on a simulated screen, in lock or torn. */
export function TryPicture({ deviceName, document, source, screen }: TryPictureProps) {
  const slots = useMemo(() => (document.slots ?? []).slice(0, 6), [document]);
  const timingOf = (slot: Slot): RasterTiming | undefined =>
    document.modes?.find((mode) => mode.key === slot.mode)?.timing;
  const [number, setNumber] = useState(slots[0]?.number ?? 0);
  const chosen = slots.find((slot) => slot.number === number);
  const mode = chosen === undefined ? undefined : timingOf(chosen);
  const simulated = useMemo(
    () =>
      simulateScreen({
        source,
        trim: document.everywhere?.trim ?? {},
        mode: mode ?? null,
        placement: chosen?.placement ?? {},
        screen,
        pattern: "circle",
        // 720 px high on a wide set: three to a line of 240, so that lines and gaps are even.
        longSidePx: 1280,
      }),
    [source, document, mode, chosen, screen],
  );
  const picture =
    mode === undefined
      ? undefined
      : effectivePicture({ source, trim: document.everywhere?.trim ?? {}, mode, placement: chosen?.placement ?? {} });
  const ratio =
    picture?.ok === true ? lineRatioWords(picture.value.source.heightLines, picture.value.placed.heightLines) : "";
  const state =
    mode === undefined
      ? "nothing is put out"
      : simulated.locked
        ? `${modeName(mode)}, in lock`
        : `${modeName(mode)}, out of this screen’s range`;
  return (
    <div className="grid grid-cols-1 gap-x-6 gap-y-5 sm:grid-cols-[206px_minmax(0,1fr)]">
      <div
        role="group"
        aria-label={`Slots of a simulated ${deviceName}`}
        className="order-2 grid content-start gap-x-4 gap-y-2.5 max-sm:grid-cols-2 sm:order-1"
      >
        {slots.map((slot) => (
          <SlotChoice
            key={slot.number}
            slot={slot}
            timing={timingOf(slot)}
            isChosen={slot.number === number}
            onChoose={() => setNumber(slot.number)}
          />
        ))}
      </div>
      <div className="order-1 min-w-0 sm:order-2">
        <ScreenCanvas screen={simulated} label={`Simulated picture: ${state}`} />
        <div className="mt-2.5 flex flex-wrap justify-between gap-x-4 gap-y-1 text-muted">
          <span>
            Simulated: slot {number} of a {deviceName} on a {screen.name}
          </span>
          <span aria-live="polite" className="figure">
            {simulated.locked ? ratio : state}
          </span>
        </div>
      </div>
    </div>
  );
}

function SlotChoice({
  slot,
  timing,
  isChosen,
  onChoose,
}: {
  readonly slot: Slot;
  readonly timing: RasterTiming | undefined;
  readonly isChosen: boolean;
  readonly onChoose: () => void;
}) {
  const isEmpty = timing === undefined;
  return (
    <button
      type="button"
      disabled={isEmpty}
      aria-pressed={isEmpty ? undefined : isChosen}
      onClick={onChoose}
      className={classNames(
        "border-l-3 min-w-0 pl-2.5 text-left",
        isChosen ? "border-lamp" : "border-transparent enabled:hover:border-edge",
      )}
    >
      <Tape name={isEmpty ? null : (slot.name ?? `Slot ${slot.number}`)} className="w-full" />
      {timing === undefined ? null : (
        <ModeMark timing={timing} className="mt-1 max-sm:flex-col max-sm:items-start max-sm:gap-0" />
      )}
    </button>
  );
}
