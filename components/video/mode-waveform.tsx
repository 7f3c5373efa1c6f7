"use client";

import type { ReactNode } from "react";
import { formatCount, formatNumber, formatUs } from "@/components/ui/figures";
import { useWidth } from "@/components/ui/use-width";
import { fieldWaveform, lineWaveform, waveformPath } from "@/components/video/waveform-geometry";
import type { DrawnPart, Waveform } from "@/components/video/waveform-geometry";
import { modeName } from "@/lib/timing/mode-name";
import type { RasterTiming } from "@/lib/timing/raster";
import { fieldLines, linePeriodUs } from "@/lib/timing/rates";

const HEIGHT_PX = 96;
/** Levels of a long waveform in px from its top: what lies over one stands on them. */
export const LEVELS = { syncPx: 72, blackPx: 48, whitePx: 10 } as const;
/** Below this the labels go under the drawing. */
const LABELS_FROM_PX = 620;
const LINE_SHARE = 0.36;
const FIELD_SHARE = 0.4;

const words: Readonly<Record<DrawnPart["part"], string>> = {
  frontPorch: "front porch",
  sync: "sync",
  backPorch: "back porch",
  active: "picture",
};

const partOf = (waveform: Waveform, part: DrawnPart["part"]): DrawnPart => {
  const found = waveform.parts.find((candidate) => candidate.part === part);
  if (found === undefined) throw new Error(`A waveform without ${part}`);
  return found;
};

/** "blanking drawn 2.2 times wider than the picture", or nothing where it is drawn true. */
function factorWords(factor: number): string {
  return factor < 1.05
    ? "drawn to scale"
    : `blanking drawn ${formatNumber(factor, { decimals: 1 })} times wider than the picture`;
}

export type WaveformProps = {
  readonly timing: RasterTiming;
  /** Parts in clocks too. */
  readonly inClocks?: boolean;
  /** What lies over the drawing: handles to drag. */
  readonly overlay?: (waveform: Waveform) => ReactNode;
  /** Holds the scale of blanking while something is dragged. */
  readonly pxPerBlank?: number | undefined;
};

/** One line of a mode, long form: parts in µs, blanking enlarged by the factor that is stated. */
export function LineWaveform({ timing, inClocks = false, overlay, pxPerBlank }: WaveformProps) {
  const [attach, widthPx] = useWidth(720);
  const waveform = lineWaveform(timing, { widthPx: widthPx - 24, blankingShare: LINE_SHARE, pxPerBlank });
  const clocks = (part: DrawnPart["part"]) =>
    inClocks && part !== "active" ? `, ${formatCount(partOf(waveform, part).count, "clock", "clocks")}` : "";
  const label = (part: DrawnPart["part"]) => `${words[part]} ${formatUs(partOf(waveform, part).length)}${clocks(part)}`;
  const all = waveform.parts.map((drawn) => label(drawn.part)).join(", ");
  const caption = `${modeName(timing)}: one line, ${formatUs(linePeriodUs(timing))}; ${factorWords(waveform.blankingFactor)}`;
  const wide = widthPx >= LABELS_FROM_PX;
  const [front, sync, back, active] = (["frontPorch", "sync", "backPorch", "active"] as const).map((part) =>
    partOf(waveform, part),
  );
  return (
    <figure ref={attach} className="relative min-w-0">
      <svg
        role="img"
        aria-label={`One line: ${all}`}
        width={widthPx}
        height={HEIGHT_PX}
        className="block max-w-full overflow-visible"
      >
        <path d={waveformPath(waveform.parts, LEVELS, widthPx)} className="fill-none stroke-signal" strokeWidth={2} />
        {wide && front && sync && back && active ? (
          <g className="figure fill-muted">
            <text x={front.fromPx} y={LEVELS.blackPx - (overlay === undefined ? 10 : 15)}>
              {inClocks
                ? `front ${formatUs(front.length)}${clocks("frontPorch")}`
                : `front ${formatNumber(front.length, { decimals: 2 })}`}
            </text>
            <text x={(sync.fromPx + sync.toPx) / 2} y={LEVELS.syncPx + 18} textAnchor="middle">
              {label("sync")}
            </text>
            <text x={back.fromPx + (overlay === undefined ? 6 : 9)} y={LEVELS.blackPx + 18}>
              {label("backPorch")}
            </text>
            <text
              x={(active.fromPx + active.toPx) / 2}
              y={LEVELS.whitePx + 20}
              textAnchor="middle"
              className="fill-text"
            >
              {`${label("active")}, ${formatNumber(active.count)} px`}
            </text>
          </g>
        ) : null}
      </svg>
      {overlay?.(waveform)}
      <figcaption className="figure mt-1 text-muted">
        {wide ? null : <span className="block">{all}</span>}
        <span className="block sm:text-right">{caption}</span>
      </figcaption>
    </figure>
  );
}

/** More strokes than this would run together. */
const MAX_STROKES = 48;

/** One field of a mode, long form: parts in lines; each stroke stands for a stated number of lines. */
export function FieldWaveform({ timing, overlay, pxPerBlank }: Omit<WaveformProps, "inClocks">) {
  const [attach, widthPx] = useWidth(360);
  const waveform = fieldWaveform(timing, { widthPx: widthPx - 2, blankingShare: FIELD_SHARE, pxPerBlank });
  const active = partOf(waveform, "active");
  const perStroke = Math.max(1, Math.ceil(active.count / MAX_STROKES));
  const strokes = Math.floor(active.count / perStroke);
  const blanking = waveform.parts.filter((drawn) => drawn.part !== "active");
  const path = waveformPath(blanking, LEVELS, active.fromPx);
  const comb = Array.from({ length: strokes }, (_, index) => {
    const x = active.fromPx + ((index + 0.5) * (active.toPx - active.fromPx)) / strokes;
    return `M${Math.round(x * 10) / 10} ${LEVELS.whitePx}V${LEVELS.blackPx}`;
  }).join("");
  const all = waveform.parts.map((drawn) => `${words[drawn.part]} ${formatNumber(drawn.count)}`).join(", ");
  const field = timing.interlaced ? "one field of two" : "one field";
  return (
    <figure ref={attach} className="relative min-w-0">
      <svg
        role="img"
        aria-label={`${field}, in lines: ${all}`}
        width={widthPx}
        height={HEIGHT_PX}
        className="block max-w-full overflow-visible"
      >
        <path d={path} className="fill-none stroke-signal" strokeWidth={2} />
        <path d={comb} className="fill-none stroke-signal" strokeWidth={1.5} />
        <g className="figure fill-muted">
          {blanking.map((drawn) => (
            <text
              key={drawn.part}
              x={(drawn.fromPx + drawn.toPx) / 2}
              y={drawn.part === "sync" ? LEVELS.syncPx + 18 : LEVELS.blackPx - (overlay === undefined ? 10 : 15)}
              textAnchor="middle"
            >
              {formatNumber(drawn.count)}
            </text>
          ))}
        </g>
      </svg>
      {overlay?.(waveform)}
      <figcaption className="figure mt-1 text-muted sm:text-right">
        {`${field}, ${formatNumber(fieldLines(timing))} lines, ${formatNumber(active.count)} shown${perStroke > 1 ? `; a stroke is ${perStroke}` : ""}`}
      </figcaption>
    </figure>
  );
}
