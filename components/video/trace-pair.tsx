"use client";

import { formatNumber } from "@/components/ui/figures";
import { useWidth } from "@/components/ui/use-width";
import { planeTicks } from "@/components/video/plane-geometry";
import { fieldTrace, lineTrace, tracePath, traceScale, traceSpan } from "@/components/video/trace-geometry";
import type { Trace } from "@/components/video/trace-geometry";
import type { RasterTiming } from "@/lib/timing/raster";

export type NamedRaster = { readonly name: string; readonly timing: RasterTiming };

export type TracePairProps = {
  readonly of: "line" | "field";
  /** Drawn solid. */
  readonly left: NamedRaster;
  /** Drawn dashed. */
  readonly right: NamedRaster;
  readonly laid: "under" | "over";
};

const ROW_PX = 78;
const LEVELS = { whitePx: 8, blackPx: 44, syncPx: 66 } as const;
const AXIS_PX = 26;

const kinds = {
  line: { trace: lineTrace, unit: "µs", title: "One line" },
  field: { trace: fieldTrace, unit: "ms", title: "One field" },
} as const;

const looks = [
  { className: "fill-none stroke-signal", strokeWidth: 2, strokeDasharray: undefined },
  { className: "fill-none stroke-text", strokeWidth: 1.5, strokeDasharray: "5 3" },
] as const;

function traceWords({ name, timing }: NamedRaster, of: TracePairProps["of"]): string {
  const { trace, unit } = kinds[of];
  const { parts } = trace(timing);
  const text = (value: number) => formatNumber(value, { decimals: 2 });
  return `${name}: front porch ${text(parts.frontPorch)}, sync ${text(parts.sync)}, back porch ${text(parts.backPorch)}, picture ${text(parts.active)} ${unit}`;
}

/** Lines or fields of two rasters on one scale of time, both from the start of their sync: nothing is enlarged. */
export function TracePair({ of, left, right, laid }: TracePairProps) {
  const [attach, widthPx] = useWidth(720);
  const { trace, unit, title } = kinds[of];
  const traces = [trace(left.timing), trace(right.timing)] as const;
  const span = traceSpan(traces);
  // 2 px keep the outermost strokes whole.
  const scale = traceScale(span, widthPx - 4);
  const x = (time: number) => scale(time) + 2;
  const rows = laid === "under" ? 2 : 1;
  const axisPx = rows * ROW_PX;
  return (
    <figure ref={attach} className="min-w-0">
      <figcaption className="mb-1 flex flex-wrap items-baseline gap-x-5 gap-y-1">
        <h2 className="mr-auto text-lg max-sm:w-full">{title}</h2>
        <TraceName look={looks[0]} name={left.name} />
        <TraceName look={looks[1]} name={right.name} />
      </figcaption>
      <svg
        role="img"
        aria-label={`${title}, from the start of sync. ${traceWords(left, of)}; ${traceWords(right, of)}`}
        width={widthPx}
        height={axisPx + AXIS_PX}
        className="figure block max-w-full"
      >
        <TimeAxis span={span} x={x} yPx={axisPx} unit={unit} widthPx={widthPx} />
        {traces.map((each, index) => (
          <TraceRow
            key={looks[index]?.className}
            trace={each}
            x={x}
            look={looks[index]}
            yPx={rows === 2 ? index * ROW_PX : 0}
          />
        ))}
      </svg>
    </figure>
  );
}

type Look = (typeof looks)[number];

function TraceName({ look, name }: { readonly look: Look; readonly name: string }) {
  return (
    <span className="figure inline-flex items-center gap-2 text-muted">
      <svg aria-hidden width={26} height={6}>
        <path d="M0 3H26" {...look} />
      </svg>
      {name}
    </span>
  );
}

type TraceRowProps = {
  readonly trace: Trace;
  readonly x: (time: number) => number;
  readonly look: Look | undefined;
  readonly yPx: number;
};

function TraceRow({ trace, x, look, yPx }: TraceRowProps) {
  return <path transform={`translate(0 ${yPx})`} d={tracePath(trace, x, LEVELS)} {...look} />;
}

type TimeAxisProps = {
  readonly span: readonly [number, number];
  readonly x: (time: number) => number;
  readonly yPx: number;
  readonly unit: string;
  readonly widthPx: number;
};

function TimeAxis({ span, x, yPx, unit, widthPx }: TimeAxisProps) {
  return (
    <g className="fill-muted">
      <path d={`M${x(0)} 0V${yPx}`} className="fill-none stroke-edge" strokeDasharray="1 4" />
      <path d={`M0 ${yPx}H${widthPx}`} className="fill-none stroke-edge" />
      {planeTicks(span, Math.max(3, Math.floor(widthPx / 80))).map((time) => (
        <g key={time}>
          <path d={`M${x(time)} ${yPx}v4`} className="stroke-edge" />
          <text
            x={x(time)}
            y={yPx + 18}
            textAnchor={x(time) > widthPx - 30 ? "end" : x(time) < 20 ? "start" : "middle"}
          >
            {formatNumber(time)}
            {time === 0 ? ` ${unit}` : ""}
          </text>
        </g>
      ))}
    </g>
  );
}
