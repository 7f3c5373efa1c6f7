import { blankingSpan, type BlankingSpans } from "@/lib/timing/blanking-span";
import { catalogue } from "@/lib/timing/catalogue/catalogue";
import type { Span } from "@/lib/timing/envelope";
import type { RasterTiming } from "@/lib/timing/raster";
import { axisBlank, fieldLines, horizontalUs, lineRateHz, lineTotal } from "@/lib/timing/rates";
import { sameCounts } from "@/lib/timing/same-raster";
import { inSpan, nearestInSpan } from "@/lib/timing/span";

export type BlankingPart = keyof BlankingSpans;

/** One part of blanking against what published rasters span. Horizontal figures in µs, vertical ones in lines. */
export type BlankingVerdict = {
  readonly axis: "horizontal" | "vertical";
  readonly part: BlankingPart;
  /** `absent` is a sync of 0, which nothing locks to. */
  readonly outcome: "inside" | "outside" | "absent";
  readonly measured: number;
  readonly unit: "µs" | "lines";
  /** The part in the raster's own unit: clocks across, lines down. */
  readonly count: number;
  /** Absent where no raster of this line rate is published. */
  readonly span?: Span | undefined;
  readonly nearest?: number | undefined;
  readonly from: readonly string[];
};

/** CTA-861 lets a clock be off by 0.5 % and be the same format (from memory). */
const SAME_FORMAT_CLOCK = 0.005;

const totalsOf = (timing: RasterTiming) => `${lineTotal(timing)} ${fieldLines(timing)}`;

/** Published rasters by their totals: few share them. */
const publishedByTotals = new Map<string, RasterTiming[]>();
for (const { timing } of catalogue) {
  const key = totalsOf(timing);
  publishedByTotals.set(key, [...(publishedByTotals.get(key) ?? []), timing]);
}

/** The published raster that this is, its clock off by 0.5 % at most. */
function isPublished(timing: RasterTiming): boolean {
  const alike = publishedByTotals.get(totalsOf(timing)) ?? [];
  return alike.some(
    (published) =>
      Math.abs(timing.pixelClockHz / published.pixelClockHz - 1) <= SAME_FORMAT_CLOCK && sameCounts(timing, published),
  );
}

const parts: readonly BlankingPart[] = ["frontPorch", "sync", "backPorch", "blank"];

/**
 * Compares every part of blanking with what BT.470 and the CTA-861 rasters of the same line rate span together.
 *
 * A raster of the catalogue is never outside, whatever the others of its line rate do. Without a published raster
 * near its line rate only an absent sync is told.
 * @param timing without `rasterProblems`
 */
export function judgeBlanking(timing: RasterTiming): BlankingVerdict[] {
  const span = isPublished(timing) ? undefined : blankingSpan(lineRateHz(timing));
  const us = horizontalUs(timing);
  const rows = [
    {
      axis: "horizontal" as const,
      unit: "µs" as const,
      counts: { ...timing.horizontal, blank: axisBlank(timing.horizontal) },
      measured: { ...us, blank: us.frontPorch + us.sync + us.backPorch },
      spans: span?.horizontalUs,
    },
    {
      axis: "vertical" as const,
      unit: "lines" as const,
      counts: { ...timing.vertical, blank: axisBlank(timing.vertical) },
      measured: { ...timing.vertical, blank: axisBlank(timing.vertical) },
      spans: span?.verticalLines,
    },
  ];
  return rows.flatMap(({ axis, unit, counts, measured, spans }) =>
    parts.map((part) =>
      judgePart(
        { axis, unit, part, count: counts[part], measured: measured[part], from: span?.from ?? [] },
        spans?.[part],
      ),
    ),
  );
}

function judgePart(
  part: Omit<BlankingVerdict, "outcome" | "span" | "nearest">,
  span: Span | undefined,
): BlankingVerdict {
  if (part.part === "sync" && part.count === 0) return { ...part, outcome: "absent", span, nearest: span?.[0] };
  if (span === undefined || inSpan(part.measured, span)) return { ...part, outcome: "inside", span };
  return { ...part, outcome: "outside", span, nearest: nearestInSpan(part.measured, span) };
}
