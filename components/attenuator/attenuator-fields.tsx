"use client";

import type { ReactNode } from "react";
import type { AttenuatorState, Termination } from "@/components/attenuator/attenuator-address";
import type { FigureField, Goal, Outcome } from "@/components/attenuator/attenuator-form";
import type { ScreenOption } from "@/components/library/use-my-screen";
import { SelectField, TextField } from "@/components/ui/field";
import { formatNumber, formatSpan } from "@/components/ui/figures";
import { Segmented } from "@/components/ui/segmented";

const ways = [
  { value: "level", label: "By its level" },
  { value: "readings", label: "By two readings" },
] as const;

const terminations: readonly { readonly value: Exclude<Termination, "">; readonly label: string }[] = [
  { value: "75", label: "75 Ω" },
  { value: "other", label: "Another" },
  { value: "none", label: "Nothing" },
];

export type AttenuatorFieldsProps = {
  readonly state: AttenuatorState;
  readonly outcome: Outcome;
  readonly goal: Goal;
  readonly options: readonly ScreenOption[];
  readonly onChange: (change: Partial<AttenuatorState>) => void;
};

/** What is known of the source, and what the screen takes. */
export function AttenuatorFields({ state, outcome, goal, options, onChange }: AttenuatorFieldsProps) {
  const figure = (field: FigureField, label: string, unit: string, placeholder?: string) => (
    <TextField
      label={label}
      aside={unit}
      inputMode="decimal"
      autoComplete="off"
      maxLength={20}
      placeholder={placeholder}
      value={state[field]}
      error={outcome.errors[field]}
      onChange={(event) => onChange({ [field]: event.target.value })}
      className="figure"
    />
  );
  return (
    <>
      <h2 className="mb-2 text-xl">The source</h2>
      <Segmented
        label="How the source is known"
        value={state.way}
        choices={ways}
        onChange={(way) => onChange({ way })}
        className="mb-4"
      />
      {state.way === "level" ? (
        <div className="grid grid-cols-2 items-start gap-4">
          {figure("sourceVpp", "Level, open", "V")}
          {figure("sourceOhm", "Its impedance", "Ω")}
        </div>
      ) : (
        <Readings state={state} outcome={outcome} figure={figure} onChange={onChange} />
      )}
      <p className="mt-2 text-sm text-muted">Levels are peak to peak; open is with nothing connected.</p>
      <h2 className="mb-2 mt-6 text-xl">The screen</h2>
      <SelectField
        label="Its level and load"
        options={options}
        value={state.screen}
        hint={
          goal.takesVpp === undefined
            ? "75 Ω and 0.3 V, the sync of video, unless you say otherwise."
            : `It takes ${formatSpan(goal.takesVpp, "V peak to peak", { decimalsAtMost: 2 })}.`
        }
        onChange={(event) => onChange({ screen: event.target.value, loadOhm: "", targetVpp: "" })}
      />
      <div className="mt-4 grid grid-cols-2 items-start gap-4">
        {figure("loadOhm", "Load", "Ω", formatNumber(goal.loadOhm))}
        {figure("targetVpp", "Wanted level", "V", formatNumber(goal.targetVpp))}
      </div>
    </>
  );
}

type ReadingsProps = Pick<AttenuatorFieldsProps, "state" | "outcome" | "onChange"> & {
  readonly figure: (field: FigureField, label: string, unit: string, placeholder?: string) => ReactNode;
};

/** Two levels over the same termination, and what it was. */
function Readings({ state, outcome, figure, onChange }: ReadingsProps) {
  return (
    <div className="flex flex-col gap-4">
      <fieldset>
        <legend className="mb-1.5 font-strong">What were both readings terminated with?</legend>
        <Segmented
          label="Termination of both readings"
          value={state.termination}
          choices={terminations}
          onChange={(termination) => onChange({ termination })}
        />
        <p aria-live="polite" className="mt-1.5 text-sm">
          {outcome.errors.termination === undefined ? (
            <span className="text-muted">The resistor across the output while you measured, not the meter’s own.</span>
          ) : (
            <span className="font-strong text-halt">{outcome.errors.termination}</span>
          )}
        </p>
      </fieldset>
      {state.termination === "other" ? figure("readingOhm", "Terminated with", "Ω") : null}
      <Reading
        title="First reading"
        resistor={figure("firstOhm", "Resistor", "Ω, 0: none")}
        level={figure("firstVpp", "Level", "V")}
      />
      <Reading
        title="Second reading"
        resistor={figure("secondOhm", "Resistor", "Ω")}
        level={figure("secondVpp", "Level", "V")}
      />
      {outcome.errors.readings === undefined ? null : (
        <p role="alert" className="text-sm font-strong text-halt">
          {outcome.errors.readings}
        </p>
      )}
    </div>
  );
}

type ReadingProps = { readonly title: string; readonly resistor: ReactNode; readonly level: ReactNode };

/** One reading: what was in line with the sync, and what was read. */
function Reading({ title, resistor, level }: ReadingProps) {
  return (
    <fieldset>
      <legend className="mb-1 text-sm text-muted">{title}</legend>
      <div className="grid grid-cols-2 items-start gap-4">
        {resistor}
        {level}
      </div>
    </fieldset>
  );
}
