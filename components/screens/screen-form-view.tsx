"use client";

import { Plus, X } from "lucide-react";
import { useRouter } from "next/navigation";
import { useState } from "react";
import { useFieldArray, useForm, useWatch } from "react-hook-form";
import type { Control, FieldPath, UseFormReturn } from "react-hook-form";
import { EdidDrop } from "@/components/screens/edid-drop";
import { productWords } from "@/components/screens/edid-file";
import type { EdidView } from "@/components/screens/edid-file";
import { EdidPanel } from "@/components/screens/edid-panel";
import { fillFromEdid } from "@/components/screens/fill-from-edid";
import { FigureField, SourceSelect } from "@/components/screens/limit-field";
import { LimitFields } from "@/components/screens/limit-fields";
import type { Wired } from "@/components/screens/limit-fields";
import { StandardFits } from "@/components/screens/mode-fits";
import { emptyBand, envelopeFromForm, formFromEnvelope } from "@/components/screens/screen-form";
import type { ScreenForm } from "@/components/screens/screen-form";
import { ScreenPlane } from "@/components/screens/screen-plane";
import { Button, IconButton } from "@/components/ui/button";
import { TextAreaField, TextField } from "@/components/ui/field";
import { FootBar } from "@/components/ui/foot-bar";
import { PageHead } from "@/components/ui/page-head";
import { ProblemMessage } from "@/components/ui/problem-message";
import { useToast } from "@/components/ui/toast";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { MAX_BANDS } from "@/lib/timing/envelope-problems";

export type ScreenFormViewProps = {
  readonly title: string;
  readonly lead: string;
  readonly envelope: ScreenEnvelope;
  readonly notes: string;
  /** The EDID that the form starts from. */
  readonly edid?: EdidView | null;
  readonly act: string;
  readonly isBusy: boolean;
  readonly error: Error | null;
  readonly onSave: (envelope: ScreenEnvelope, notes: string) => void;
};

/** Every limit of a screen with its source; the plane beside it follows what is typed. */
export function ScreenFormView(props: ScreenFormViewProps) {
  const { title, lead, envelope, notes, act, isBusy, error, onSave } = props;
  const router = useRouter();
  const [edid, setEdid] = useState(props.edid ?? null);
  const form = useForm<ScreenForm>({
    defaultValues:
      edid === null
        ? formFromEnvelope(envelope, notes)
        : fillFromEdid(formFromEnvelope({ name: "", bands: [] }, notes), edid),
  });
  const { register, control, getFieldState, formState } = form;
  const errorOf = (name: string) => getFieldState(name as FieldPath<ScreenForm>, formState).error?.message;
  const save = (values: ScreenForm) => {
    const read = envelopeFromForm(values);
    if (read.ok) return onSave(read.value, values.notes.trim());
    // Each complaint names a field of this form; the first gets the focus.
    read.error.forEach(({ path, message }, index) =>
      form.setError(path as FieldPath<ScreenForm>, { message }, { shouldFocus: index === 0 }),
    );
  };
  const complaints = Object.keys(formState.errors).length;
  return (
    <form noValidate onSubmit={(event) => void form.handleSubmit(save)(event)} className="flex flex-1 flex-col">
      <div className="gutter">
        <PageHead title={title} lead={lead} />
      </div>
      <div className="gutter grid flex-1 grid-cols-1 gap-x-10 gap-y-8 border-t border-line pb-8 pt-5 lg:grid-cols-[minmax(0,1fr)_minmax(320px,460px)]">
        <div className="min-w-0">
          <EdidPart form={form} edid={edid} onEdid={setEdid} />
          <TextField
            label="Name"
            placeholder="Gallery 2, wide CRT"
            error={errorOf("name")}
            fieldClassName="max-w-md"
            {...register("name")}
          />
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

type EdidPartProps = {
  readonly form: UseFormReturn<ScreenForm>;
  readonly edid: EdidView | null;
  readonly onEdid: (edid: EdidView | null) => void;
};

/** An EDID fills in what it states. What was typed before can be had back. */
function EdidPart({ form, edid, onEdid }: EdidPartProps) {
  const toast = useToast();
  const fill = (next: EdidView) => {
    const typed = form.getValues();
    form.reset(fillFromEdid(typed, next), { keepDefaultValues: true });
    onEdid(next);
    toast({
      text: `Filled in from the EDID of ${productWords(next.reading)}.`,
      undo: {
        onUndo: () => {
          form.reset(typed, { keepDefaultValues: true });
          onEdid(edid);
        },
      },
    });
  };
  return (
    <>
      <EdidDrop onEdid={fill} className="mb-5" />
      {edid === null ? null : <EdidPanel edid={edid} />}
    </>
  );
}

function LivePreview({
  control,
  fallback,
}: {
  readonly control: Control<ScreenForm>;
  readonly fallback: ScreenEnvelope;
}) {
  const values = useWatch({ control });
  const read = envelopeFromForm(values as ScreenForm);
  const shown = read.ok ? read.value : fallback;
  return (
    <aside aria-label="What this screen takes" className="min-w-0 lg:sticky lg:top-4 lg:self-start">
      <ScreenPlane envelope={shown} heightPx={260} />
      <h2 className="mb-2 mt-4 text-lg">Published modes on it</h2>
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
        <div
          key={field.id}
          className="grid grid-cols-2 items-start gap-3 border-b border-line py-3 md:grid-cols-[repeat(4,minmax(0,1fr))_36px]"
        >
          <FigureField
            name={`bands.${index}.lineMinKhz`}
            label="Line rate from"
            unit="kHz"
            error={errorOf(`bands.${index}.lineMinKhz`)}
            register={register}
          />
          <FigureField
            name={`bands.${index}.lineMaxKhz`}
            label="to"
            unit="kHz"
            error={errorOf(`bands.${index}.lineMaxKhz`)}
            register={register}
          />
          <FigureField
            name={`bands.${index}.fieldMinHz`}
            label="Field rate from"
            unit="Hz"
            error={errorOf(`bands.${index}.fieldMinHz`)}
            register={register}
          />
          <FigureField
            name={`bands.${index}.fieldMaxHz`}
            label="to"
            unit="Hz"
            error={errorOf(`bands.${index}.fieldMaxHz`)}
            register={register}
          />
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
