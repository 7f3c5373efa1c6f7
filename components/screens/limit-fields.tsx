"use client";

import type { ReactNode } from "react";
import { Controller, useWatch } from "react-hook-form";
import type { Control, UseFormRegister } from "react-hook-form";
import { FigureField, SourceSelect } from "@/components/screens/limit-field";
import { aspectWords, limitWords, syncKindWords } from "@/components/screens/limit-words";
import { aspects, syncKinds } from "@/components/screens/screen-form";
import type { ScreenForm } from "@/components/screens/screen-form";
import { Checkbox } from "@/components/ui/checkbox";
import { inputLook } from "@/components/ui/field";
import { Segmented } from "@/components/ui/segmented";
import type { EnvelopeLimit } from "@/lib/timing/envelope";

/** What the fields of a screen's form are tied to. */
export type Wired = {
  readonly register: UseFormRegister<ScreenForm>;
  readonly errorOf: (name: string) => string | undefined;
};

/** Every limit but the bands, each with its source. */
export function LimitFields({ control, register, errorOf }: Wired & { readonly control: Control<ScreenForm> }) {
  const figure = (
    name: "maxPixelClockMhz" | "minSyncUs" | "minBackPorchUs" | "minFieldBlankUs" | "loadOhm",
    label: string,
    unit: string,
  ) => <FigureField name={name} label={label} unit={unit} error={errorOf(name)} register={register} />;
  const aspect = useWatch({ control, name: "aspect" });
  // An aspect that came from elsewhere stays on offer.
  const offered = [...new Set([...aspects, aspect].filter((each) => each !== ""))];
  return (
    <div className="mt-6">
      <LimitRow limit="interlace" register={register}>
        <Controller
          control={control}
          name="interlace"
          render={({ field }) => (
            <Segmented
              label={limitWords.interlace}
              value={field.value}
              onChange={field.onChange}
              choices={[
                { value: "taken", label: "Taken" },
                { value: "not-taken", label: "Not taken" },
                { value: "unknown", label: "Not known" },
              ]}
            />
          )}
        />
      </LimitRow>
      <LimitRow limit="maxPixelClockHz" register={register}>
        {figure("maxPixelClockMhz", "At most", "MHz")}
      </LimitRow>
      <LimitRow limit="minSyncUs" register={register}>
        {figure("minSyncUs", "At least", "µs")}
      </LimitRow>
      <LimitRow limit="minBackPorchUs" register={register}>
        {figure("minBackPorchUs", "At least", "µs")}
      </LimitRow>
      <LimitRow limit="minFieldBlankUs" register={register}>
        {figure("minFieldBlankUs", "At least", "µs")}
      </LimitRow>
      <LimitRow limit="syncKinds" register={register}>
        <div className="grid grid-cols-2 gap-x-4">
          {syncKinds.map((kind) => (
            <Controller
              key={kind}
              control={control}
              name={`syncKinds.${kind}`}
              render={({ field }) => (
                <Checkbox label={syncKindWords[kind]} checked={field.value} onChange={field.onChange} />
              )}
            />
          ))}
        </div>
      </LimitRow>
      <LimitRow limit="syncVpp" register={register}>
        <div className="grid grid-cols-2 gap-3">
          <FigureField name="syncMinV" label="From" unit="V" error={errorOf("syncMinV")} register={register} />
          <FigureField name="syncMaxV" label="to" unit="V" error={errorOf("syncMaxV")} register={register} />
        </div>
      </LimitRow>
      <LimitRow limit="loadOhm" register={register}>
        {figure("loadOhm", "Load", "Ω")}
      </LimitRow>
      <LimitRow limit="aspect" register={register}>
        <select aria-label={limitWords.aspect} className={inputLook} {...register("aspect")}>
          <option value="">not known</option>
          {offered.map((each) => (
            <option key={each} value={each}>
              {aspectWords(each)}
            </option>
          ))}
        </select>
      </LimitRow>
      <LimitRow limit="visiblePct" register={register}>
        <div className="grid grid-cols-2 gap-3 md:grid-cols-4">
          <FigureField
            name="hiddenLeftPct"
            label="Left"
            unit="%"
            error={errorOf("hiddenLeftPct")}
            register={register}
          />
          <FigureField
            name="hiddenRightPct"
            label="Right"
            unit="%"
            error={errorOf("hiddenRightPct")}
            register={register}
          />
          <FigureField name="hiddenTopPct" label="Top" unit="%" error={errorOf("hiddenTopPct")} register={register} />
          <FigureField
            name="hiddenBottomPct"
            label="Bottom"
            unit="%"
            error={errorOf("hiddenBottomPct")}
            register={register}
          />
        </div>
      </LimitRow>
    </div>
  );
}

function LimitRow({
  limit,
  register,
  children,
}: {
  readonly limit: EnvelopeLimit;
  readonly register: UseFormRegister<ScreenForm>;
  readonly children: ReactNode;
}) {
  return (
    <div className="grid grid-cols-1 items-center gap-x-5 gap-y-2 border-b border-line py-2.5 sm:grid-cols-[150px_minmax(0,1fr)_176px]">
      <span className="font-[500]">{limitWords[limit]}</span>
      <div className="min-w-0 max-w-md">{children}</div>
      <SourceSelect limit={limit} register={register} />
    </div>
  );
}
