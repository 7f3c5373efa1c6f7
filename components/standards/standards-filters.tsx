"use client";

import { documentsByKey } from "@/components/standards/standards-address";
import type { StandardsState } from "@/components/standards/standards-address";
import type { ScreenOption } from "@/components/library/use-my-screen";
import { Checkbox } from "@/components/ui/checkbox";
import { SelectField, TextField } from "@/components/ui/field";
import { formatCount, parseFigure } from "@/components/ui/figures";

const documentOptions = [
  { value: "", label: "All documents" },
  ...Object.entries(documentsByKey).map(([value, label]) => ({ value, label })),
];

const figureError = (typed: string) =>
  typed.trim() === "" || parseFigure(typed) !== null ? undefined : "This is no figure.";

export type StandardsFiltersProps = {
  readonly state: StandardsState;
  readonly options: readonly ScreenOption[];
  readonly screen: ScreenOption;
  readonly found: number;
  readonly onChange: (change: Partial<StandardsState>) => void;
};

/** What the list is searched for, and the screen that it is held against. */
export function StandardsFilters({ state, options, screen, found, onChange }: StandardsFiltersProps) {
  return (
    <div
      role="search"
      className="grid grid-cols-2 items-start gap-x-4 gap-y-3 border-t border-line py-4 md:grid-cols-4 xl:grid-cols-[minmax(0,1fr)_110px_110px_250px_270px_auto_auto]"
    >
      <TextField
        label="Search"
        type="search"
        maxLength={100}
        placeholder="1440 px"
        value={state.text}
        onChange={(event) => onChange({ text: event.target.value })}
        fieldClassName="col-span-2 xl:col-span-1"
      />
      <TextField
        label="Lines"
        inputMode="numeric"
        autoComplete="off"
        maxLength={12}
        placeholder="240"
        value={state.lines}
        error={figureError(state.lines)}
        onChange={(event) => onChange({ lines: event.target.value })}
        className="figure"
      />
      <TextField
        label="Rate"
        aside="Hz"
        inputMode="decimal"
        autoComplete="off"
        maxLength={12}
        placeholder="60"
        value={state.rate}
        error={figureError(state.rate)}
        onChange={(event) => onChange({ rate: event.target.value })}
        className="figure"
      />
      <SelectField
        label="Document"
        options={documentOptions}
        value={state.document}
        onChange={(event) => onChange({ document: event.target.value })}
        fieldClassName="max-md:col-span-2"
      />
      <SelectField
        label="Hold against"
        options={options}
        value={screen.value}
        onChange={(event) =>
          onChange({ screen: event.target.value, fitting: event.target.value === "" ? false : state.fitting })
        }
        fieldClassName="max-md:col-span-2"
      />
      <div className="flex min-h-9 items-center md:mt-7">
        <Checkbox
          label="Only what fits"
          checked={state.fitting && screen.envelope !== null}
          disabled={screen.envelope === null}
          onChange={(fitting) => onChange({ fitting })}
        />
      </div>
      <p
        aria-live="polite"
        className="flex min-h-9 items-center whitespace-nowrap text-sm text-muted max-md:justify-end md:mt-7"
      >
        {formatCount(found, "raster", "rasters")}
      </p>
    </div>
  );
}
