import { fieldLines, horizontalUs, linePeriodUs, linesPerField } from "@/lib/timing/rates";
import type { AxisParts } from "@/lib/timing/rates";
import type { RasterTiming } from "@/lib/timing/raster";

/** One line or one field over time: it begins with the front porch, and time 0 is the start of its sync. */
export type Trace = {
  readonly beginsAt: number;
  readonly parts: AxisParts;
  /** Where the next one begins; half a line after the last part where fields interlace. */
  readonly endsAt: number;
};

/** One line of a raster, in µs. */
export function lineTrace(timing: RasterTiming): Trace {
  const parts = horizontalUs(timing);
  return { beginsAt: -parts.frontPorch, parts, endsAt: linePeriodUs(timing) - parts.frontPorch };
}

/** One field of a raster, in ms. */
export function fieldTrace(timing: RasterTiming): Trace {
  const ms = (lines: number) => (lines * linePeriodUs(timing)) / 1000;
  const { active, frontPorch, sync, backPorch } = timing.vertical;
  const parts = { active: ms(active), frontPorch: ms(frontPorch), sync: ms(sync), backPorch: ms(backPorch) };
  const rest = ms(linesPerField(timing) - fieldLines(timing));
  return { beginsAt: -parts.frontPorch, parts, endsAt: ms(fieldLines(timing)) - parts.frontPorch + rest };
}

/** The time that holds all traces. */
export function traceSpan(traces: readonly Trace[]): readonly [number, number] {
  return [Math.min(...traces.map((trace) => trace.beginsAt)), Math.max(...traces.map((trace) => trace.endsAt))];
}

/** Time to px: one scale for all traces of a drawing. */
export function traceScale(span: readonly [number, number], widthPx: number): (time: number) => number {
  return (time) => Math.round(((time - span[0]) / (span[1] - span[0])) * widthPx * 100) / 100;
}

export type TraceLevels = { readonly syncPx: number; readonly blackPx: number; readonly whitePx: number };

/** SVG path of a trace: black on the porches, down in sync, up while the picture lasts. */
export function tracePath(trace: Trace, x: (time: number) => number, levels: TraceLevels): string {
  const { sync, backPorch, active } = trace.parts;
  const { blackPx, syncPx, whitePx } = levels;
  const steps = `H${x(0)}V${syncPx}H${x(sync)}V${blackPx}H${x(sync + backPorch)}V${whitePx}H${x(sync + backPorch + active)}`;
  return `M${x(trace.beginsAt)} ${blackPx}${steps}V${blackPx}H${x(trace.endsAt)}`;
}
