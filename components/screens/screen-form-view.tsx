"use client";

import { Plus, X } from "lucide-react";
import { useRouter } from "next/navigation";
import type { ReactNode } from "react";
import { Controller, useFieldArray, useForm, useWatch } from "react-hook-form";
import type { Control, FieldPath, UseFormRegister } from "react-hook-form";
import { FigureField, SourceSelect } from "@/components/screens/limit-field";
import { aspectWords, limitWords, syncKindWords } from "@/components/screens/limit-words";
import { ScreenPlane, StandardFits } from "@/components/screens/screen-detail";
import { aspects, emptyBand, envelopeFromForm, formFromEnvelope, syncKinds } from "@/components/screens/screen-form";
import type { ScreenForm } from "@/components/screens/screen-form";
import { Button, IconButton } from "@/components/ui/button";
import { Checkbox } from "@/components/ui/checkbox";
import { inputLook, TextAreaField, TextField } from "@/components/ui/field";
import { FootBar } from "@/components/ui/foot-bar";
import { PageHead } from "@/components/ui/page-head";
import { ProblemMessage } from "@/components/ui/problem-message";
import { Segmented } from "@/components/ui/segmented";
import type { EnvelopeLimit, ScreenEnvelope } from "@/lib/timing/envelope";
import { MAX_BANDS } from "@/lib/timing/envelope-problems";

export type ScreenFormViewProps = {
  readonly title: string;
  readonly lead: string;
  readonly envelope: ScreenEnvelope;
  readonly notes: string;
  readonly act: string;
  readonly isBusy: boolean;
  readonly error: Error | null;
  readonly onSave: (envelope: ScreenEnvelope, notes: string) => void;
};

type Wired = { readonly register: UseFormRegister<ScreenForm>; readonly errorOf: (name: string) => string | undefined };

/** Every limit of a screen with its source; the plane beside it follows what is typed. */
export function ScreenFormView({ title, lead, envelope, notes, act, isBusy, error, onSave }: ScreenFormViewProps) {
  const router = useRouter();
  const form = useForm<ScreenForm>({ defaultValues: formFromEnvelope(envelope, notes) });
  const { register, control, getFieldState, formState } = form;
  const errorOf = (name: string) => getFieldState(name as FieldPath<ScreenForm>, formState).error?.message;
  const save = (values: ScreenForm) => {
    const read = envelopeFromForm(values);
    if (read.ok) return onSave(read.value, values.notes.trim());
    // Each complaint names a field of this form; the first gets the focus.
    read.error.forEach(({ path, message }, index) => form.setError(path as FieldPath<ScreenForm>, { message }, { shouldFocus: index === 0 }));
  };
  const complaints = Object.keys(formState.errors).length;
  return (
    <form noValidate onSubmit={(event) => void form.handleSubmit(save)(event)} className="flex flex-1 flex-col">
      <div className="gutter">
        <PageHead title={title} lead={lead} />
      </div>
      <div className="gutter grid grid-cols-1 flex-1 gap-x-10 gap-y-8 border-t border-line pt-5 pb-8 lg:grid-cols-[minmax(0,1fr)_minmax(320px,460px)]">
        <div className="min-w-0">
          <TextField label="Name" placeholder="Gallery 2, wide CRT" error={errorOf("name")} fieldClassName="max-w-md" {...register("name")} />
          <BandFields control={control} register={register} errorOf={errorOf} />
          <LimitFields control={control} register={register} errorOf={errorOf} />
          <div className="mt-5 max-w-2xl">
            <TextAreaField label="Notes" hint="Where it stands, what was adjusted, by whom." {...register("notes")} />
          </div>
        </div>
        <LivePreview control={control} fallback={envelope} />
      </div>
      {error === null ? null : (
        <div className="gutter pb-4">
          <ProblemMessage error={error} />
        </div>
      )}
      <FootBar
        status={
          complaints === 0 ? (
            <span className="text-muted">What stays empty is not checked.</span>
          ) : (
            <>
              <strong>Not yet:</strong> {complaints === 1 ? "a field needs" : "some fields need"} another look.
            </>
          )
        }
      >
        <Button onClick={() => router.back()}>Cancel</Button>
        <Button type="submit" kind="primary" disabled={isBusy}>
          {act}
        </Button>
      </FootBar>
    </form>
  );
}

function LivePreview({ control, fallback }: { readonly control: Control<ScreenForm>; readonly fallback: ScreenEnvelope }) {
  const values = useWatch({ control });
  const read = envelopeFromForm(values as ScreenForm);
  const shown = read.ok ? read.value : fallback;
  return (
    <aside aria-label="What this screen takes" className="min-w-0 lg:sticky lg:top-4 lg:self-start">
      <ScreenPlane envelope={shown} heightPx={260} />
      <h2 className="mt-4 mb-2 text-lg">Standard modes on it</h2>
      <StandardFits envelope={shown} />
    </aside>
  );
}

function BandFields({ control, register, errorOf }: Wired & { readonly control: Control<ScreenForm> }) {
  const { fields, append, remove } = useFieldArray({ control, name: "bands" });
  return (
    <fieldset className="mt-6">
      <div className="flex flex-wrap items-end justify-between gap-3 border-b border-line pb-2">
        <legend className="float-left text-lg font-strong">Bands</legend>
        <SourceSelect limit="bands" register={register} />
      </div>
      {fields.map((field, index) => (
        <div key={field.id} className="grid grid-cols-2 items-start gap-3 border-b border-line py-3 md:grid-cols-[repeat(4,minmax(0,1fr))_36px]">
          <FigureField name={`bands.${index}.lineMinKhz`} label="Line rate from" unit="kHz" error={errorOf(`bands.${index}.lineMinKhz`)} register={register} />
          <FigureField name={`bands.${index}.lineMaxKhz`} label="to" unit="kHz" error={errorOf(`bands.${index}.lineMaxKhz`)} register={register} />
          <FigureField name={`bands.${index}.fieldMinHz`} label="Field rate from" unit="Hz" error={errorOf(`bands.${index}.fieldMinHz`)} register={register} />
          <FigureField name={`bands.${index}.fieldMaxHz`} label="to" unit="Hz" error={errorOf(`bands.${index}.fieldMaxHz`)} register={register} />
          <IconButton label={`Take band ${index + 1} away`} onClick={() => remove(index)} className="md:mt-5">
            <X aria-hidden size={17} />
          </IconButton>
        </div>
      ))}
      {fields.length >= MAX_BANDS ? null : (
        <Button size="small" className="mt-3" icon={<Plus aria-hidden size={15} />} onClick={() => append(emptyBand)}>
          Add a band
        </Button>
      )}
    </fieldset>
  );
}

function LimitFields({ control, register, errorOf }: Wired & { readonly control: Control<ScreenForm> }) {
  const figure = (name: "maxPixelClockMhz" | "minSyncUs" | "minBackPorchUs" | "minFieldBlankUs" | "loadOhm", label: string, unit: string) => (
    <FigureField name={name} label={label} unit={unit} error={errorOf(name)} register={register} />
  );
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
      <LimitRow limit="maxPixelClockHz" register={register}>{figure("maxPixelClockMhz", "At most", "MHz")}</LimitRow>
      <LimitRow limit="minSyncUs" register={register}>{figure("minSyncUs", "At least", "µs")}</LimitRow>
      <LimitRow limit="minBackPorchUs" register={register}>{figure("minBackPorchUs", "At least", "µs")}</LimitRow>
      <LimitRow limit="minFieldBlankUs" register={register}>{figure("minFieldBlankUs", "At least", "µs")}</LimitRow>
      <LimitRow limit="syncKinds" register={register}>
        <div className="grid grid-cols-2 gap-x-4">
          {syncKinds.map((kind) => (
            <Controller key={kind} control={control} name={`syncKinds.${kind}`} render={({ field }) => <Checkbox label={syncKindWords[kind]} checked={field.value} onChange={field.onChange} />} />
          ))}
        </div>
      </LimitRow>
      <LimitRow limit="syncVpp" register={register}>
        <div className="grid grid-cols-2 gap-3">
          <FigureField name="syncMinV" label="From" unit="V" error={errorOf("syncMinV")} register={register} />
          <FigureField name="syncMaxV" label="to" unit="V" error={errorOf("syncMaxV")} register={register} />
        </div>
      </LimitRow>
      <LimitRow limit="loadOhm" register={register}>{figure("loadOhm", "Load", "Ω")}</LimitRow>
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
          <FigureField name="hiddenLeftPct" label="Left" unit="%" error={errorOf("hiddenLeftPct")} register={register} />
          <FigureField name="hiddenRightPct" label="Right" unit="%" error={errorOf("hiddenRightPct")} register={register} />
          <FigureField name="hiddenTopPct" label="Top" unit="%" error={errorOf("hiddenTopPct")} register={register} />
          <FigureField name="hiddenBottomPct" label="Bottom" unit="%" error={errorOf("hiddenBottomPct")} register={register} />
        </div>
      </LimitRow>
    </div>
  );
}

function LimitRow({ limit, register, children }: { readonly limit: EnvelopeLimit; readonly register: UseFormRegister<ScreenForm>; readonly children: ReactNode }) {
  return (
    <div className="grid grid-cols-1 items-center gap-x-5 gap-y-2 border-b border-line py-2.5 sm:grid-cols-[150px_minmax(0,1fr)_176px]">
      <span className="font-[500]">{limitWords[limit]}</span>
      <div className="min-w-0 max-w-md">{children}</div>
      <SourceSelect limit={limit} register={register} />
    </div>
  );
}
