"use client";

import { useId } from "react";
import { formatFieldRate, formatLineRate, formatLineRateSpan, formatNumber, formatSpan } from "@/components/ui/figures";
import { useWidth } from "@/components/ui/use-width";
import { planeDomain, planeTicks, rayLabels, raySegment, xOf, yOf } from "@/components/video/plane-geometry";
import type { PlaneDomain, PlaneFrame, PlanePoint, RayLabel, RaySegment } from "@/components/video/plane-geometry";
import type { EnvelopeBand } from "@/lib/timing/envelope";

export type RatePoint = PlanePoint & {
  readonly id: string;
  readonly label: string;
  /** fits: a ring; chosen: a filled lamp; outside: a stop's octagon. */
  readonly kind: "fits" | "chosen" | "outside";
  /** Its label stands beside it on the plane. */
  readonly isNamed?: boolean;
};

export type RatePlaneProps = {
  /** Whose bands are shaded. */
  readonly screenName: string;
  readonly bands: readonly EnvelopeBand[];
  readonly points: readonly RatePoint[];
  /** Lines of a field, whose dotted rays help to read the plane. */
  readonly rayLines?: readonly number[];
  readonly heightPx?: number;
};

const LEFT_PX = 34;
const BOTTOM_PX = 24;

/** Line rate across, field rate up: bands of a screen shaded, rasters as points, line counts as dotted rays. */
export function RatePlane({ screenName, bands, points, rayLines = [], heightPx = 320 }: RatePlaneProps) {
  const [attach, widthPx] = useWidth(420);
  const clipId = useId();
  const domain = planeDomain(bands, points);
  if (domain === undefined) return <p className="text-muted">No rates are known for {screenName}.</p>;
  const frame: PlaneFrame = {
    leftPx: LEFT_PX,
    topPx: 6,
    widthPx: widthPx - LEFT_PX - 6,
    heightPx: heightPx - BOTTOM_PX - 6,
  };
  const rays = rayLines.map((lines) => raySegment(lines, domain));
  return (
    <figure ref={attach} className="min-w-0">
      <svg
        role="img"
        aria-label={planeWords(screenName, bands, points)}
        width={widthPx}
        height={heightPx}
        className="figure block max-w-full"
      >
        <PlaneAxes domain={domain} frame={frame} />
        <clipPath id={clipId}>
          <rect x={frame.leftPx} y={frame.topPx} width={frame.widthPx} height={frame.heightPx} />
        </clipPath>
        <g clipPath={`url(#${clipId})`}>
          {bands.map((band) => (
            <PlaneBand key={band.lineRateHz.join()} band={band} domain={domain} frame={frame} />
          ))}
          {rays.map((ray, index) =>
            ray === undefined ? null : <PlaneRay key={rayLines[index]} ray={ray} domain={domain} frame={frame} />,
          )}
        </g>
        {rayLabels(rays, domain, frame).map((label, index) => (
          <PlaneRayName key={rayLines[index]} label={label} lines={rayLines[index]} />
        ))}
        {points.map((point) => (
          <PlanePointMark key={point.id} point={point} domain={domain} frame={frame} />
        ))}
      </svg>
      <figcaption className="mt-1 flex justify-between gap-3 text-sm text-muted">
        <span>Shaded: what {screenName} takes</span>
        <span className="figure whitespace-nowrap">Hz over kHz</span>
      </figcaption>
    </figure>
  );
}

type Placed = { readonly domain: PlaneDomain; readonly frame: PlaneFrame };

function PlaneAxes({ domain, frame }: Placed) {
  const bottom = frame.topPx + frame.heightPx;
  return (
    <g className="fill-muted">
      <path
        d={`M${frame.leftPx} ${frame.topPx}V${bottom}H${frame.leftPx + frame.widthPx}`}
        className="fill-none stroke-edge"
      />
      {planeTicks(domain.fieldRateHz, 6).map((rate) => (
        <text key={`f${rate}`} x={frame.leftPx - 7} y={yOf(rate, domain, frame) + 4} textAnchor="end">
          {formatNumber(rate)}
        </text>
      ))}
      {planeTicks(domain.lineRateHz, Math.max(3, Math.floor(frame.widthPx / 70))).map((rate) => (
        <text key={`l${rate}`} x={xOf(rate, domain, frame)} y={bottom + 17} textAnchor="middle">
          {formatNumber(rate / 1000, { decimalsAtMost: 2 })}
        </text>
      ))}
    </g>
  );
}

function PlaneBand({ band, domain, frame }: Placed & { readonly band: EnvelopeBand }) {
  const [left, right] = band.lineRateHz.map((rate) => xOf(rate, domain, frame));
  const [bottom, top] = band.fieldRateHz.map((rate) => yOf(rate, domain, frame));
  if (left === undefined || right === undefined || top === undefined || bottom === undefined) return null;
  // A fixed-frequency band would be a hairline: it is drawn 3 px wide at least.
  const widthPx = Math.max(3, right - left);
  return (
    <rect
      x={(left + right - widthPx) / 2}
      y={top}
      width={widthPx}
      height={Math.max(3, bottom - top)}
      className="fill-signal/15 stroke-signal"
    />
  );
}

function PlaneRay({ ray, domain, frame }: Placed & { readonly ray: RaySegment }) {
  const at = (point: PlanePoint) => `${xOf(point.lineRateHz, domain, frame)} ${yOf(point.fieldRateHz, domain, frame)}`;
  return <path d={`M${at(ray.from)}L${at(ray.to)}`} className="fill-none stroke-muted" strokeDasharray="1 4" />;
}

function PlaneRayName({ label, lines }: { readonly label: RayLabel | undefined; readonly lines: number | undefined }) {
  if (label === undefined || lines === undefined) return null;
  return (
    <text x={label.x} y={label.y} textAnchor="end" className="fill-muted">
      {formatNumber(lines)} lines
    </text>
  );
}

function PlanePointMark({ point, domain, frame }: Placed & { readonly point: RatePoint }) {
  const [x, y] = [xOf(point.lineRateHz, domain, frame), yOf(point.fieldRateHz, domain, frame)];
  return (
    <g transform={`translate(${x} ${y})`}>
      <title>{`${point.label}: ${formatLineRate(point.lineRateHz)}, ${formatFieldRate(point.fieldRateHz)}`}</title>
      {point.kind === "outside" ? <path d="M-3 -7h6l4 4v6l-4 4h-6l-4-4v-6z" className="fill-halt" /> : null}
      {point.kind === "chosen" ? <circle r={5} className="fill-lamp" /> : null}
      {point.kind === "fits" ? <circle r={4} className="fill-bg stroke-signal" strokeWidth={2} /> : null}
      {point.isNamed === true ? (
        <text y={21} textAnchor={nameAnchor(x, frame)} className={point.kind === "outside" ? "fill-halt" : "fill-text"}>
          {point.label}
        </text>
      ) : null}
    </g>
  );
}

/** A name near the edge of the plane runs inwards. */
function nameAnchor(x: number, frame: PlaneFrame): "start" | "middle" | "end" {
  if (x < frame.leftPx + 40) return "start";
  return x > frame.leftPx + frame.widthPx - 40 ? "end" : "middle";
}

function planeWords(screenName: string, bands: readonly EnvelopeBand[], points: readonly RatePoint[]): string {
  const taken = bands.map((band) => `${formatLineRateSpan(band.lineRateHz)} at ${formatSpan(band.fieldRateHz, "Hz")}`);
  const kinds: Readonly<Record<RatePoint["kind"], string>> = {
    fits: "fits",
    chosen: "chosen",
    outside: "does not fit",
  };
  const shown = points.map(
    (point) =>
      `${point.label} (${formatLineRate(point.lineRateHz)}, ${formatFieldRate(point.fieldRateHz)}) ${kinds[point.kind]}`,
  );
  return `${screenName} takes ${taken.join(" and ")}. ${shown.join("; ")}`;
}
