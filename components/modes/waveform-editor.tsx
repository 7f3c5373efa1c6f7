"use client";

import { useState } from "react";
import { formatCount, formatUs } from "@/components/ui/figures";
import { FieldWaveform, LEVELS, LineWaveform } from "@/components/video/mode-waveform";
import { WaveformHandle } from "@/components/video/waveform-handle";
import type { DrawnPart, Waveform } from "@/components/video/waveform-geometry";
import { useModesActs } from "@/components/modes/modes-context";
import { figureWords } from "@/components/modes/store/figure-words";
import type { RasterTiming } from "@/lib/timing/raster";
import { axisTotal } from "@/lib/timing/rates";

/** Both waveforms of the raster in hand, each with a handle at the end of every part of its blanking. */
export function WaveformEditor({ timing }: { readonly timing: RasterTiming }) {
  return (
    <div className="gutter grid grid-cols-1 gap-x-9 gap-y-3 border-b border-line pb-3 pt-1 lg:grid-cols-[minmax(0,1fr)_372px]">
      <AxisEditor timing={timing} axis="horizontal" />
      <AxisEditor timing={timing} axis="vertical" />
    </div>
  );
}

const parts = ["frontPorch", "sync", "backPorch"] as const;

type AxisProps = { readonly timing: RasterTiming; readonly axis: "horizontal" | "vertical" };

function AxisEditor({ timing, axis }: AxisProps) {
  // While a handle is held the scale stays, so that the border stays under the pointer.
  const [held, setHeld] = useState<number | undefined>(undefined);
  const overlay = (waveform: Waveform) => (
    <AxisHandles
      timing={timing}
      axis={axis}
      waveform={waveform}
      onHold={() => setHeld(waveform.pxPerBlank)}
      onLetGo={() => setHeld(undefined)}
    />
  );
  return axis === "horizontal" ? (
    <LineWaveform timing={timing} inClocks overlay={overlay} pxPerBlank={held} />
  ) : (
    <FieldWaveform timing={timing} overlay={overlay} pxPerBlank={held} />
  );
}

type HandlesProps = AxisProps & {
  readonly waveform: Waveform;
  readonly onHold: () => void;
  readonly onLetGo: () => void;
};

function AxisHandles({ timing, axis, waveform, onHold, onLetGo }: HandlesProps) {
  const { hold, letGo, turn } = useModesActs();
  const drawn = (part: DrawnPart["part"]) => waveform.parts.find((one) => one.part === part);
  const maxCount = axisTotal(timing[axis]);
  return parts.map((part) => {
    const figure = `${axis}.${part}` as const;
    const { toPx = 0, length = 0, count = 0 } = drawn(part) ?? {};
    const text =
      axis === "horizontal"
        ? `${formatCount(count, "clock", "clocks")}, ${formatUs(length)}`
        : formatCount(count, "line", "lines");
    // Clocks of one µs are all alike, whatever the part's own length.
    const perCount = axis === "vertical" ? waveform.pxPerBlank : (waveform.pxPerBlank * 1e6) / timing.pixelClockHz;
    return (
      <WaveformHandle
        key={part}
        label={figureWords[figure].label}
        valueText={text}
        atPx={toPx}
        topPx={LEVELS.blackPx}
        count={count}
        maxCount={maxCount}
        pxPerCount={perCount}
        onHold={() => {
          hold(figure);
          onHold();
        }}
        onLetGo={() => {
          letGo();
          onLetGo();
        }}
        onChange={(next) => turn(figure, next, true)}
      />
    );
  });
}
