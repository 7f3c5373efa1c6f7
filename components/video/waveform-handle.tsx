"use client";

import { useRef } from "react";
import type { KeyboardEvent, PointerEvent } from "react";
import { keyStep } from "@/components/video/ruler-geometry";

export type WaveformHandleProps = {
  /** What it moves, for assistive technology: "Front porch". */
  readonly label: string;
  /** The figure with its unit. */
  readonly valueText: string;
  /** Where it stands on the drawing. */
  readonly atPx: number;
  readonly topPx: number;
  readonly count: number;
  readonly maxCount: number;
  /** How far one clock, or one line, is on the drawing. */
  readonly pxPerCount: number;
  readonly onHold: () => void;
  readonly onLetGo: () => void;
  readonly onChange: (count: number) => void;
};

/** The border of a part of blanking: it is dragged, or moved with the arrow keys (Shift for ten). */
export function WaveformHandle(props: WaveformHandleProps) {
  const { label, valueText, atPx, topPx, count, maxCount, pxPerCount, onHold, onLetGo, onChange } = props;
  const drag = useRef<{ readonly fromPx: number; readonly count: number } | null>(null);
  const change = (next: number) => {
    const inside = Math.min(maxCount, Math.max(0, Math.round(next)));
    if (inside !== count) onChange(inside);
  };
  const onPointerDown = (event: PointerEvent<HTMLDivElement>) => {
    event.currentTarget.setPointerCapture(event.pointerId);
    drag.current = { fromPx: event.clientX, count };
  };
  const onPointerMove = (event: PointerEvent<HTMLDivElement>) => {
    if (drag.current === null || pxPerCount <= 0) return;
    change(drag.current.count + (event.clientX - drag.current.fromPx) / pxPerCount);
  };
  const onKeyDown = (event: KeyboardEvent) => {
    const next = keyStep(event.key, event.shiftKey, count, { min: 0, max: maxCount, step: 1 });
    if (next === null) return;
    event.preventDefault();
    change(next);
  };
  return (
    <div
      role="slider"
      tabIndex={0}
      aria-label={label}
      aria-valuemin={0}
      aria-valuemax={maxCount}
      aria-valuenow={count}
      aria-valuetext={valueText}
      onFocus={onHold}
      onBlur={onLetGo}
      onPointerDown={onPointerDown}
      onPointerMove={onPointerMove}
      onPointerUp={() => {
        drag.current = null;
      }}
      onPointerCancel={() => {
        drag.current = null;
      }}
      onKeyDown={onKeyDown}
      // 24 px to touch, 11 px to see.
      className="absolute flex h-9 w-6 -translate-x-1/2 -translate-y-1/2 cursor-ew-resize touch-none select-none items-center justify-center rounded-[4px]"
      style={{ left: atPx, top: topPx }}
    >
      <svg aria-hidden width={11} height={20} viewBox="0 0 11 20" className="fill-surface stroke-lamp">
        <rect x={1} y={1} width={9} height={18} rx={3} strokeWidth={1.6} />
        <path d="M4 6v8M7 6v8" strokeWidth={1.2} />
      </svg>
    </div>
  );
}
