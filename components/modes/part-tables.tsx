"use client";

import type { ReactNode } from "react";
import { FigureField } from "@/components/modes/figure-field";
import { KeepBox } from "@/components/modes/keep-box";
import { useModes } from "@/components/modes/modes-context";
import type { TypedFigure } from "@/components/modes/store/acts";
import type { KeptFigure, StatedFigure } from "@/components/modes/store/choices";
import { classNames } from "@/components/ui/class-names";
import { formatFigure, formatUs } from "@/components/ui/figures";
import { editableFigures } from "@/lib/timing/fit/editable-figures";
import type { RasterTiming } from "@/lib/timing/raster";
import { fieldBlankUs, horizontalUs, linePeriodUs } from "@/lib/timing/rates";

const parts = [
  { part: "frontPorch", label: "Front" },
  { part: "sync", label: "Sync" },
  { part: "backPorch", label: "Back" },
] as const;

/** The raster in hand, figure by figure: line rate and totals, and the parts of its blanking with their µs. */
export function PartTables({ timing }: { readonly timing: RasterTiming }) {
  return (
    <div className="pt-1">
      <Totals timing={timing} />
      <Parts timing={timing} axis="horizontal" label="Blanking across, clocks" />
      <Parts timing={timing} axis="vertical" label="Blanking down, lines of a field" />
    </div>
  );
}

function Totals({ timing }: { readonly timing: RasterTiming }) {
  const stated = useModes((state) => state.choices.stated);
  const figures = editableFigures(timing);
  const cell = (figure: "lineRateHz" | "lineTotal" | "fieldLines", name: string, below: string) => (
    <Cell name={name} figure={figure} value={stated[figure] ?? figures[figure]} below={below} />
  );
  return (
    <Group label="Rate and totals">
      {cell("lineRateHz", "kHz", formatUs(linePeriodUs(timing)))}
      {cell("lineTotal", "Clocks", "in a line")}
      {cell("fieldLines", "Lines", "in a field")}
    </Group>
  );
}

function Parts({
  timing,
  axis,
  label,
}: {
  readonly timing: RasterTiming;
  readonly axis: "horizontal" | "vertical";
  readonly label: string;
}) {
  const us = (part: (typeof parts)[number]["part"]) =>
    axis === "horizontal" ? horizontalUs(timing)[part] : timing.vertical[part] * linePeriodUs(timing);
  const whole = axis === "horizontal" ? parts.reduce((sum, { part }) => sum + us(part), 0) : fieldBlankUs(timing);
  return (
    <Group label={label} aside={shortUs(whole)}>
      {parts.map(({ part, label: name }) => (
        <Cell key={part} name={name} figure={`${axis}.${part}`} value={timing[axis][part]} below={shortUs(us(part))} />
      ))}
    </Group>
  );
}

/** Lines are tens of µs long: their decimals say nothing. */
function shortUs(us: number): string {
  return us < 100 ? formatUs(us) : formatFigure(us, "µs", { decimals: 0 });
}

function Group({
  label,
  aside,
  children,
}: {
  readonly label: string;
  readonly aside?: string;
  readonly children: ReactNode;
}) {
  return (
    <fieldset className="border-b border-line py-2.5 last:border-b-0">
      <legend className="float-left mb-1 flex w-full justify-between gap-2">
        <span className="font-[500]">{label}</span>
        {aside === undefined ? null : <span className="figure text-muted">{aside}</span>}
      </legend>
      <div className="clear-both grid grid-cols-3 gap-x-2.5">{children}</div>
    </fieldset>
  );
}

type CellProps = {
  readonly name: string;
  readonly figure: TypedFigure & (KeptFigure | StatedFigure);
  readonly value: number;
  readonly below: string;
};

function Cell({ name, figure, value, below }: CellProps) {
  return (
    <div className="min-w-0">
      <span aria-hidden className="mb-0.5 block text-sm text-muted">
        {name}
      </span>
      <FigureField figure={figure} value={value} isCell />
      <span
        className={classNames("mt-0.5 block whitespace-nowrap text-muted", /\d/u.test(below) ? "figure" : "text-sm")}
      >
        {below}
      </span>
      <KeepBox figure={figure} />
    </div>
  );
}
