import type { RasterTiming } from "@/lib/timing/raster";
import type { Placement } from "@/lib/profile/document";
import type { Finding, Remedy } from "@/lib/profile/finding";
import { largestPctInside, nearestOffsetInside, outsideRaster } from "@/lib/profile/fit-placement";
import { slotPath } from "@/lib/profile/paths";
import { percent, withUnit } from "@/lib/profile/words";
import type { CheckContext, JudgedSlot } from "./context";
import { leaveOut, setValue } from "./remedies";
import { isOutside } from "./shape";

export type PlacementAxis = {
  readonly axis: "horizontal" | "vertical";
  readonly active: number;
  readonly unit: string;
  readonly sizeField: "widthPct" | "heightPct";
  readonly offsetField: "offsetPx" | "offsetLines";
  /** Absent: not named. */
  readonly sizePct: number | undefined;
  readonly offset: number | undefined;
};

/** Both axes of a placement in its mode; vertically in field lines. */
export function placementAxes(timing: RasterTiming, placement: Placement): readonly PlacementAxis[] {
  return [
    {
      axis: "horizontal",
      active: timing.horizontal.active,
      unit: "px",
      sizeField: "widthPct",
      offsetField: "offsetPx",
      sizePct: placement.widthPct,
      offset: placement.offsetPx,
    },
    {
      axis: "vertical",
      active: timing.vertical.active,
      unit: timing.interlaced ? "field lines" : "lines",
      sizeField: "heightPct",
      offsetField: "offsetLines",
      sizePct: placement.heightPct,
      offset: placement.offsetLines,
    },
  ];
}

const words = {
  horizontal: { large: "too wide", largest: "Widest", before: "too far left", after: "too far right" },
  vertical: { large: "too tall", largest: "Tallest", before: "too high", after: "too low" },
} as const;

type Judged = PlacementAxis & { readonly size: number; readonly before: number; readonly after: number };

function remediesFor(
  context: CheckContext,
  number: number,
  judged: Judged,
): { largest: number | null; remedies: Remedy[] } {
  const { active, offset = 0, sizePct = 100, sizeField, offsetField, unit } = judged;
  const limits = context.device?.numbers;
  const whole = { from: 0, to: active };
  const largest = largestPctInside(active, offset, whole, limits?.[`slots[*].placement.${sizeField}`]);
  const nearest = nearestOffsetInside(active, sizePct, offset, whole, limits?.[`slots[*].placement.${offsetField}`]);
  return {
    largest,
    remedies: [
      ...(largest === null
        ? []
        : [setValue(`Use ${percent(largest)}`, slotPath(number, `placement.${sizeField}`), largest)]),
      ...(nearest === null
        ? []
        : [setValue(`Use ${withUnit(nearest, unit)}`, slotPath(number, `placement.${offsetField}`), nearest)]),
      leaveOut(number),
    ],
  };
}

function ofAxis(context: CheckContext, number: number, axis: PlacementAxis): Finding[] {
  const { sizePct, offset, active, unit } = axis;
  // An offset alone says nothing: the size that it goes with is not named.
  if (sizePct === undefined) return [];
  const judged: Judged = { ...axis, ...outsideRaster(active, sizePct, offset ?? 0) };
  const outside = judged.before + judged.after;
  if (outside === 0) return [];
  const word = words[axis.axis];
  const isLarge = judged.size > active;
  const how = isLarge ? word.large : judged.before > 0 ? word.before : word.after;
  const { largest, remedies } = remediesFor(context, number, judged);
  const { size } = judged;
  const fact = isLarge
    ? `, and this mode shows ${active}`
    : ` at ${withUnit(offset ?? 0, unit)}, in a mode of ${active}`;
  const at =
    largest === null ? "" : ` ${word.largest} that fits at ${withUnit(offset ?? 0, unit)}: ${percent(largest)}.`;
  const field = isLarge ? axis.sizeField : axis.offsetField;
  return [
    {
      rule: `placement.${axis.axis}`,
      path: slotPath(number, `placement.${field}`),
      severity: context.device?.outsideRaster === "refuses" ? "stop" : "caution",
      measured: outside,
      limit: 0,
      unit,
      sentence: `Slot ${number} is ${withUnit(outside, unit)} ${how}.`,
      detail: `${withUnit(sizePct, "%")} of ${withUnit(active, unit)} is ${size}${fact}.${at}`,
      limitSource: context.device ? "driver" : "the mode's active raster",
      slots: [number],
      remedies,
    },
  ];
}

function ofSlot(context: CheckContext, slot: JudgedSlot): Finding[] {
  const { timing } = slot;
  const { placement } = slot.slot;
  if (!timing || !placement || isOutside(slot)) return [];
  return placementAxes(timing, placement).flatMap((axis) => ofAxis(context, slot.number, axis));
}

/** `placement`: pictures that reach beyond their mode's active raster, by how much, and what would fit. */
export function placementFindings(context: CheckContext): Finding[] {
  return context.slots.flatMap((slot) => ofSlot(context, slot));
}
