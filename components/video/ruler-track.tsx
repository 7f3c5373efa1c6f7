import { classNames } from "@/components/ui/class-names";
import { fractionOf, tickFractions } from "@/components/video/ruler-geometry";
import type { RulerRange } from "@/components/video/ruler-geometry";

export type TrackValues = {
  readonly range: RulerRange;
  /** The stretch that is safe now; null where nothing is, absent where nobody knows. */
  readonly safe?: readonly [number, number] | null;
  readonly was?: number;
  readonly planned?: number;
  readonly now?: number;
};

const percent = (value: number, range: RulerRange) => `${fractionOf(value, range) * 100}%`;

/** The drawing of a range ruler: ticks of the device's range, safe stretch, pins. Says nothing by itself. */
export function RulerTrack({
  range,
  safe,
  was,
  planned,
  now,
  className,
}: TrackValues & { readonly className?: string }) {
  return (
    <span aria-hidden className={classNames("relative block h-[18px] border-b border-edge", className)}>
      {tickFractions(range).map((fraction) => (
        <span
          key={fraction}
          className="absolute bottom-0 h-[5px] w-px bg-edge"
          style={{ left: `${fraction * 100}%` }}
        />
      ))}
      {safe === undefined || safe === null ? null : (
        <span
          className="absolute -bottom-[2px] h-1 bg-signal"
          style={{ left: percent(safe[0], range), right: `calc(100% - ${percent(safe[1], range)})`, minWidth: "2px" }}
        />
      )}
      {was === undefined || was === now ? null : <SolidPin at={percent(was, range)} tone="was" />}
      {now === undefined ? null : <SolidPin at={percent(now, range)} tone="now" />}
      {planned === undefined || planned === now ? null : <HollowPin at={percent(planned, range)} />}
    </span>
  );
}

function SolidPin({ at, tone }: { readonly at: string; readonly tone: "was" | "now" }) {
  return (
    <svg
      viewBox="0 0 12 20"
      className={classNames(
        "absolute -bottom-[2px] -ml-1.5 h-5 w-3 transition-[left] duration-move",
        tone === "was" ? "fill-muted" : "fill-lamp",
      )}
      style={{ left: at }}
    >
      <path d="M0 0h12L7 7v13H5V7z" />
    </svg>
  );
}

function HollowPin({ at }: { readonly at: string }) {
  return (
    <svg
      viewBox="0 0 14 22"
      className="absolute -bottom-[2px] -ml-[7px] h-[22px] w-[14px] fill-bg stroke-lamp transition-[left] duration-move"
      style={{ left: at }}
      strokeWidth={2}
    >
      <circle cx="7" cy="6.5" r="5" />
      <path d="M7 12v10" strokeDasharray="3 2" />
    </svg>
  );
}
