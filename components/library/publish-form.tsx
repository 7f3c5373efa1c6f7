"use client";

import { useState } from "react";
import { Controller, useForm } from "react-hook-form";
import { drawable } from "@/components/library/document-view";
import { Button } from "@/components/ui/button";
import { Checkbox } from "@/components/ui/checkbox";
import { TextAreaField, TextField } from "@/components/ui/field";
import { formatCount } from "@/components/ui/figures";
import { FootBar } from "@/components/ui/foot-bar";
import { PartHead } from "@/components/ui/page-head";
import { ProblemMessage } from "@/components/ui/problem-message";
import { Segmented } from "@/components/ui/segmented";
import { ModeMark } from "@/components/video/mode-glyph";
import { Tape } from "@/components/video/tape";
import type { BackupDetail } from "@/lib/contracts/backup";
import type { NewProfile } from "@/lib/contracts/profile";
import type { ProfileDocument } from "@/lib/profile/document";

type PublishValues = { title: string; summary: string; notes: string; visibility: "private" | "shared" };

export type PublishFormProps = {
  readonly backup: BackupDetail;
  readonly isBusy: boolean;
  readonly error: Error | null;
  readonly onPublish: (profile: NewProfile) => void;
};

/** Slots that hold something: those with a mode. */
function usedSlots(document: ProfileDocument) {
  return (document.slots ?? []).filter((slot) => slot.mode !== undefined);
}

/** Which slots, and the words that others find the profile by. */
export function PublishForm({ backup, isBusy, error, onPublish }: PublishFormProps) {
  const { document } = backup.content;
  const slots = usedSlots(document);
  const [chosen, setChosen] = useState<ReadonlySet<number>>(() => new Set(slots.map((slot) => slot.number)));
  const form = useForm<PublishValues>({ defaultValues: { title: "", summary: "", notes: "", visibility: "private" } });
  const { errors } = form.formState;
  const publish = (values: PublishValues) =>
    onPublish({
      fromBackup: backup.id,
      slots: [...chosen].sort((a, b) => a - b),
      title: values.title.trim(),
      summary: values.summary,
      notes: values.notes,
      visibility: values.visibility,
    });
  const toggle = (number: number, isOn: boolean) => {
    const next = new Set(chosen);
    if (isOn) next.add(number);
    else next.delete(number);
    setChosen(next);
  };
  return (
    <form noValidate onSubmit={(event) => void form.handleSubmit(publish)(event)} className="flex flex-1 flex-col">
      <div className="gutter grid flex-1 grid-cols-1 gap-x-12 gap-y-8 border-t border-line pb-8 pt-5 lg:grid-cols-2">
        <section aria-labelledby="slots-head">
          <PartHead
            id="slots-head"
            title="Slots"
            aside={`${chosen.size} of ${formatCount(slots.length, "slot", "slots")}`}
          />
          <ul className="border-t border-line">
            {slots.map((slot) => {
              const timing = drawable(document.modes?.find((mode) => mode.key === slot.mode)?.timing);
              return (
                <li key={slot.number} className="flex flex-wrap items-center gap-x-5 gap-y-1 border-b border-line py-2">
                  <Checkbox
                    checked={chosen.has(slot.number)}
                    onChange={(isOn) => toggle(slot.number, isOn)}
                    label={<Tape name={slot.name ?? `Slot ${slot.number}`} number={slot.number} />}
                  />
                  {timing === undefined ? null : <ModeMark timing={timing} />}
                </li>
              );
            })}
          </ul>
        </section>
        <section aria-labelledby="words-head" className="flex flex-col gap-4">
          <PartHead id="words-head" title="About it" />
          <TextField
            label="Title"
            maxLength={120}
            placeholder="Wide CRT, 240 and 480 lines"
            error={errors.title === undefined ? undefined : "Give it a title."}
            {...form.register("title", { validate: (title) => title.trim() !== "" })}
          />
          <TextField label="Summary" maxLength={500} hint="One line for the list." {...form.register("summary")} />
          <TextAreaField
            label="Notes"
            rows={6}
            maxLength={20_000}
            hint="What it was tested on, what to watch for."
            {...form.register("notes")}
          />
          <div>
            <p className="mb-1.5 font-strong">Who sees it</p>
            <Controller
              control={form.control}
              name="visibility"
              render={({ field }) => (
                <Segmented
                  label="Who sees it"
                  value={field.value}
                  onChange={field.onChange}
                  choices={[
                    { value: "private", label: "Only you" },
                    { value: "shared", label: "Everybody" },
                  ]}
                />
              )}
            />
            <p className="mt-1.5 text-sm text-muted">You can change this at any time.</p>
          </div>
          {error === null ? null : <ProblemMessage error={error} />}
        </section>
      </div>
      <FootBar
        status={
          chosen.size === 0 ? (
            <>
              <strong>Not yet:</strong> choose at least one slot.
            </>
          ) : (
            <span className="text-muted">Names of slots and modes are part of it; serial number and port are not.</span>
          )
        }
      >
        <Button type="submit" kind="primary" disabled={isBusy || chosen.size === 0}>
          Publish
        </Button>
      </FootBar>
    </form>
  );
}
