"use client";

import { useId } from "react";
import type { UseFormRegister } from "react-hook-form";
import { limitWords, sourceWords } from "@/components/screens/limit-words";
import type { ScreenForm } from "@/components/screens/screen-form";
import { inputLook } from "@/components/ui/field";
import type { EnvelopeLimit, LimitSource } from "@/lib/timing/envelope";

const sources = Object.keys(sourceWords) as readonly LimitSource[];

/** Where a limit comes from: asked beside every limit. */
export function SourceSelect({
  limit,
  register,
}: {
  readonly limit: EnvelopeLimit;
  readonly register: UseFormRegister<ScreenForm>;
}) {
  return (
    <select
      aria-label={`${limitWords[limit]}, where it comes from`}
      className={`${inputLook} sm:w-44`}
      {...register(`sources.${limit}`, { setValueAs: (value: string) => (value === "" ? undefined : value) })}
    >
      <option value="">source not stated</option>
      {sources.map((source) => (
        <option key={source} value={source}>
          {sourceWords[source]}
        </option>
      ))}
    </select>
  );
}

export type FigureName =
  | "maxPixelClockMhz"
  | "minSyncUs"
  | "minBackPorchUs"
  | "minFieldBlankUs"
  | "loadOhm"
  | "syncMinV"
  | "syncMaxV"
  | "hiddenLeftPct"
  | "hiddenRightPct"
  | "hiddenTopPct"
  | "hiddenBottomPct"
  | `bands.${number}.${"lineMinKhz" | "lineMaxKhz" | "fieldMinHz" | "fieldMaxHz"}`;

export type FigureFieldProps = {
  readonly name: FigureName;
  readonly label: string;
  readonly unit: string;
  readonly error: string | undefined;
  readonly register: UseFormRegister<ScreenForm>;
};

/** A small figure with its unit behind it. */
export function FigureField({ name, label, unit, error, register }: FigureFieldProps) {
  const id = useId();
  const errorId = `${id}-error`;
  return (
    <div>
      <label htmlFor={id} className="block text-sm text-muted">
        {label}
      </label>
      <span className="relative block">
        <input
          id={id}
          inputMode="decimal"
          autoComplete="off"
          aria-invalid={error === undefined ? undefined : true}
          aria-describedby={error === undefined ? undefined : errorId}
          className={`${inputLook} figure pr-12 text-[14px]`}
          {...register(name)}
        />
        <span aria-hidden className="figure pointer-events-none absolute right-3 top-1/2 -translate-y-1/2 text-muted">
          {unit}
        </span>
      </span>
      {error === undefined ? null : (
        <p id={errorId} className="mt-1 text-sm font-strong text-halt">
          {error}
        </p>
      )}
    </div>
  );
}
