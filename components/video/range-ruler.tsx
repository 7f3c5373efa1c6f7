"use client";

import { useId, useState } from "react";
import type { KeyboardEvent, PointerEvent, ReactNode } from "react";
import { classNames } from "@/components/ui/class-names";
import { formatNumber, parseFigure, withUnit } from "@/components/ui/figures";
import { keyStep, snap, standingOf, stepDecimals, valueAt } from "@/components/video/ruler-geometry";
import { RulerTrack } from "@/components/video/ruler-track";
import type { TrackValues } from "@/components/video/ruler-track";

export type RangeRulerProps = TrackValues & {
  readonly label: string;
  readonly unit: string;
  /** Makes the ruler a slider with typed entry. Gets values on the device's own steps. */
  readonly onChange?: (value: number) => void;
  readonly disabled?: boolean;
  /** The figure without its unit; by default with the decimals of the step. */
  readonly formatValue?: (value: number) => string;
  /** Right under the track; by default what the safe stretch means. */
  readonly note?: ReactNode;
};

/** The range of the device, what is safe in it, and where a value was, is planned and is now. One for every figure. */
export function RangeRuler(props: RangeRulerProps) {
  const { label, unit, range, safe, was, planned, now, onChange, disabled = false, note } = props;
  const labelId = useId();
  const format = props.formatValue ?? ((value: number) => formatNumber(value, { decimals: stepDecimals(range.step) }));
  const value = planned ?? now;
  const figure = value === undefined ? "not known" : withUnit(format(value), unit);
  const outside = value !== undefined && safe !== undefined && standingOf(value, safe) === "outside";
  return (
    <div role="group" aria-labelledby={labelId} className="py-2.5">
      <div className="mb-1.5 flex items-baseline justify-between gap-3">
        <span id={labelId} className="font-strong">
          {label}
        </span>
        {onChange === undefined || value === undefined ? (
          <span className="figure text-[15px]">{figure}</span>
        ) : (
          <TypedValue
            label={label}
            unit={unit}
            text={format(value)}
            disabled={disabled}
            onValue={(typed) => onChange(snap(typed, range))}
          />
        )}
      </div>
      {onChange === undefined || value === undefined ? (
        <RulerTrack range={range} safe={safe} was={was} planned={planned} now={now} />
      ) : (
        <RulerSlider {...props} labelId={labelId} value={value} valueText={figure} onChange={onChange} />
      )}
      <div className="mt-1.5 flex items-baseline justify-between gap-3 text-sm text-muted">
        <span className="figure">
          {format(range.min)} … {format(range.max)}
        </span>
        <span>{note ?? safeWords(safe, outside)}</span>
      </div>
    </div>
  );
}

function safeWords(safe: TrackValues["safe"], outside: boolean): string {
  if (safe === undefined) return "";
  if (safe === null) return "nothing here is safe on this screen";
  return outside ? "outside what is safe on this screen" : "safe on this screen";
}

type SliderProps = RangeRulerProps & {
  readonly labelId: string;
  readonly value: number;
  readonly valueText: string;
  readonly onChange: (value: number) => void;
};

function RulerSlider({
  labelId,
  value,
  valueText,
  range,
  safe,
  was,
  planned,
  now,
  disabled = false,
  onChange,
}: SliderProps) {
  const change = (next: number) => {
    if (next !== value) onChange(next);
  };
  const onKeyDown = (event: KeyboardEvent) => {
    const next = disabled ? null : keyStep(event.key, event.shiftKey, value, range);
    if (next === null) return;
    event.preventDefault();
    change(next);
  };
  const onPointer = (event: PointerEvent<HTMLDivElement>) => {
    if (disabled || (event.type === "pointermove" && event.buttons !== 1)) return;
    const box = event.currentTarget.getBoundingClientRect();
    if (event.type === "pointerdown") event.currentTarget.setPointerCapture(event.pointerId);
    if (box.width > 0) change(valueAt((event.clientX - box.left) / box.width, range));
  };
  return (
    <div
      role="slider"
      tabIndex={disabled ? -1 : 0}
      aria-labelledby={labelId}
      aria-valuemin={range.min}
      aria-valuemax={range.max}
      aria-valuenow={value}
      aria-valuetext={valueText}
      aria-disabled={disabled || undefined}
      onKeyDown={onKeyDown}
      onPointerDown={onPointer}
      onPointerMove={onPointer}
      className={classNames("touch-pan-y pb-1 pt-1.5", disabled ? "cursor-not-allowed" : "cursor-ew-resize")}
    >
      <RulerTrack range={range} safe={safe} was={was} planned={planned} now={now} />
    </div>
  );
}

type TypedProps = {
  readonly label: string;
  readonly unit: string;
  readonly text: string;
  readonly disabled: boolean;
  readonly onValue: (value: number) => void;
};

/** The figure as a field: Enter or leaving it takes the value, Esc gives it up, what is no figure is not taken. */
function TypedValue({ label, unit, text, disabled, onValue }: TypedProps) {
  const [draft, setDraft] = useState<string | null>(null);
  const take = () => {
    if (draft === null) return;
    const value = parseFigure(draft);
    setDraft(null);
    if (value !== null) onValue(value);
  };
  const invalid = draft !== null && parseFigure(draft) === null;
  return (
    <span className="figure inline-flex items-baseline gap-1.5 text-[15px]">
      <input
        aria-label={`${label}, ${unit}`}
        aria-invalid={invalid || undefined}
        inputMode="decimal"
        disabled={disabled}
        value={draft ?? text}
        onChange={(event) => setDraft(event.target.value)}
        onFocus={(event) => event.target.select()}
        onBlur={take}
        onKeyDown={(event) => {
          if (event.key === "Enter") take();
          if (event.key === "Escape" && draft !== null) {
            event.stopPropagation();
            setDraft(null);
          }
        }}
        className="aria-invalid:border-halt w-[8ch] rounded-[4px] border border-transparent bg-transparent px-1 text-right hover:border-edge focus:border-edge focus:bg-surface"
      />
      <span>{unit}</span>
    </span>
  );
}
