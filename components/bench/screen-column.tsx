"use client";

import { useMemo, useState } from "react";
import { Segmented } from "@/components/ui/segmented";
import { formatNumber } from "@/components/ui/figures";
import { ScreenCanvas } from "@/components/video/screen-canvas";
import { effectivePicture } from "@/lib/picture/effective-picture";
import { simulateScreen, type SimulatedScreen } from "@/lib/picture/simulated-screen";
import type { Pattern } from "@/lib/picture/patterns";
import { findSlot } from "@/lib/profile/paths";
import { modeName } from "@/lib/timing/mode-name";
import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";
import { ScreenChooser } from "@/components/bench/screen-chooser";
import { SimulatedControls } from "@/components/bench/simulated-controls";
import { lockWords } from "@/components/bench/lock-words";
import { useBench } from "@/components/bench/bench-provider";
import type { BenchScreen, DeviceReading } from "@/components/bench/store/types";

const PATTERNS = [{ value: "circle", label: "Circle" }, { value: "crosshatch", label: "Crosshatch" }, { value: "bars", label: "Bars" }] as const;

function simulate(reading: DeviceReading, screen: BenchScreen, pattern: Pattern): SimulatedScreen {
  const slot = findSlot(reading.content.document, reading.activeSlot);
  const source: SourceFormat = reading.arriving?.format ?? { activePx: 1280, activeLines: 720, interlaced: false, fieldRateHz: 60 };
  return simulateScreen({
    source, pattern, mode: reading.rasterOut, trim: reading.content.document.everywhere?.trim ?? {}, placement: slot?.placement ?? {},
    screen: screen.kind === "known" ? screen.envelope : undefined, syncKind: slot?.syncKind,
  });
}

/** "720 → 234, 3.08 : 1": source lines over the lines that show them. */
function ratioWords(raster: RasterTiming | null, reading: DeviceReading): string {
  const format = reading.arriving?.format;
  if (!raster || !format) return "";
  const slot = findSlot(reading.content.document, reading.activeSlot);
  const picture = effectivePicture({ source: format, trim: reading.content.document.everywhere?.trim ?? {}, mode: raster, placement: slot?.placement ?? {} });
  if (!picture.ok) return "";
  const { source, placed, sourceLinesPerOutputLine } = picture.value;
  return `${formatNumber(source.heightLines)} → ${formatNumber(placed.heightLines)}, ${formatNumber(sourceLinesPerOutputLine, { decimalsAtMost: 2 })} : 1`;
}

/** What arrives, what leaves, whether the screen locks, and how the picture lies on it. Simulated, and said so. */
export function ScreenColumn() {
  const reading = useBench((state) => state.reading);
  const screen = useBench((state) => state.screen);
  const [pattern, setPattern] = useState<Pattern>("circle");
  const simulated = useMemo(() => (reading ? simulate(reading, screen, pattern) : null), [reading, screen, pattern]);
  if (!reading || !simulated) return <p className="text-muted">The device is being read.</p>;
  const raster = reading.rasterOut;
  const words = lockWords(simulated, screen.kind === "known");
  return (
    <section aria-labelledby="screen-head">
      <div className="mb-2 flex flex-wrap items-baseline justify-between gap-x-4">
        <h2 id="screen-head" className="text-xl">On the screen <span className="font-[500] text-muted">simulated</span></h2>
        <span className="figure text-muted">{ratioWords(raster, reading)}</span>
      </div>
      <ScreenCanvas screen={simulated} label={`Simulated: slot ${reading.activeSlot}${raster ? `, ${modeName(raster)}` : ""}. ${words}`} />
      <p aria-live="polite" className="mt-2" data-locked={simulated.locked}>{words}</p>
      <div className="mt-2 max-w-[340px]"><Segmented label="Pattern" value={pattern} onChange={setPattern} choices={PATTERNS} /></div>
      <div className="mt-4 max-w-[420px]"><ScreenChooser /></div>
      <SimulatedControls />
    </section>
  );
}
