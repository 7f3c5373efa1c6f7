"use client";

import { useId, useRef, useState } from "react";
import type { KeyboardEvent, PointerEvent } from "react";
import { classNames } from "@/components/ui/class-names";
import { parseFigure } from "@/components/ui/figures";
import { useModes, useModesActs } from "@/components/modes/modes-context";
import { figureText, figureWords } from "@/components/modes/store/figure-words";
import type { TypedFigure } from "@/components/modes/store/acts";

export type FigureFieldProps = {
  readonly figure: TypedFigure;
  /** In Hz, or a count. */
  readonly value: number;
  readonly disabled?: boolean;
  /** Narrow, without its unit: a cell of a small table. */
  readonly isCell?: boolean;
  readonly describedBy?: string | undefined;
};

const STEPS_WITH_SHIFT = 10;

/** A figure to type: the page follows every key; the arrow keys move it by a step; Esc or leaving it shows what was taken. */
export function FigureField({ figure, value, disabled = false, isCell = false, describedBy }: FigureFieldProps) {
  const { hold, letGo, turn } = useModesActs();
  const error = useModes((state) => state.errors[figure]);
  const [draft, setDraft] = useState<string | null>(null);
  const errorId = useId();
  const scrubFrom = useRef(value);
  const { label, unit, scale, step } = figureWords[figure];
  const isNoFigure = draft !== null && parseFigure(draft) === null;
  const complaint = isNoFigure && draft !== "" ? "This is no figure." : error;
  const type = (text: string) => {
    setDraft(text);
    const typed = parseFigure(text);
    if (typed !== null) turn(figure, roundHz(typed * scale));
  };
  const onKeyDown = (event: KeyboardEvent) => {
    const by = event.key === "ArrowUp" ? 1 : event.key === "ArrowDown" ? -1 : 0;
    if (event.key === "Escape" || event.key === "Enter") setDraft(null);
    if (by === 0) return;
    event.preventDefault();
    setDraft(null);
    turn(figure, roundHz(value + by * step * scale * (event.shiftKey ? STEPS_WITH_SHIFT : 1)));
  };
  return (
    <span className="block">
      <span
        className={classNames(
          "flex min-h-9 items-baseline gap-2 rounded-control border bg-surface py-1 focus-within:border-text",
          isCell ? "px-1.5" : "px-2.5",
          complaint === undefined ? "border-edge" : "border-halt",
          disabled && "opacity-60",
        )}
      >
        <input
          aria-label={`${label}, ${unit}`}
          aria-invalid={complaint === undefined ? undefined : true}
          aria-describedby={
            [complaint === undefined ? undefined : errorId, describedBy].filter(Boolean).join(" ") || undefined
          }
          inputMode="decimal"
          autoComplete="off"
          disabled={disabled}
          value={draft ?? figureText(figure, value)}
          onFocus={(event) => {
            hold(figure);
            event.target.select();
          }}
          onBlur={() => {
            setDraft(null);
            letGo();
          }}
          onChange={(event) => type(event.target.value)}
          onKeyDown={onKeyDown}
          className={classNames(
            "figure w-full min-w-0 bg-transparent outline-none",
            isCell ? "text-[14px]" : "text-[17px]",
          )}
        />
        {isCell || disabled ? null : (
          <ScrubUnit
            unit={unit}
            onScrub={(by) => turn(figure, roundHz(scrubFrom.current + by * step * scale))}
            onHold={() => {
              scrubFrom.current = value;
              hold(figure);
            }}
            onLetGo={letGo}
          />
        )}
      </span>
      {complaint === undefined ? null : (
        <span id={errorId} role="alert" className="mt-1 block text-sm font-strong text-halt">
          {complaint}
        </span>
      )}
    </span>
  );
}

/** What was typed in MHz or kHz is a whole number of µHz: binary fractions of it are noise. */
function roundHz(value: number): number {
  return Math.round(value * 1e6) / 1e6;
}

/** So many px of dragging are one step. */
const PX_A_STEP = 5;

type ScrubProps = {
  readonly unit: string;
  readonly onHold: () => void;
  readonly onLetGo: () => void;
  /** Steps from where the unit was taken hold of. */
  readonly onScrub: (steps: number) => void;
};

/** The unit of a figure, dragged sideways to change it; the field's arrow keys do the same. */
function ScrubUnit({ unit, onHold, onLetGo, onScrub }: ScrubProps) {
  const drag = useRef<{ readonly fromPx: number; steps: number } | null>(null);
  const end = () => {
    if (drag.current !== null) onLetGo();
    drag.current = null;
  };
  const onPointerDown = (event: PointerEvent<HTMLSpanElement>) => {
    event.preventDefault();
    event.currentTarget.setPointerCapture(event.pointerId);
    drag.current = { fromPx: event.clientX, steps: 0 };
    onHold();
  };
  const onPointerMove = (event: PointerEvent<HTMLSpanElement>) => {
    if (drag.current === null) return;
    const steps = Math.round((event.clientX - drag.current.fromPx) / PX_A_STEP);
    if (steps === drag.current.steps) return;
    drag.current.steps = steps;
    onScrub(steps);
  };
  return (
    <span
      aria-hidden
      title="Drag to change"
      onPointerDown={onPointerDown}
      onPointerMove={onPointerMove}
      onPointerUp={end}
      onPointerCancel={end}
      className="figure -my-1 -mr-1 cursor-ew-resize touch-none select-none px-1 py-1.5 text-muted hover:text-lamp"
    >
      {unit}
    </span>
  );
}
