"use client";

import { useId } from "react";
import type { ComponentProps, ReactNode } from "react";
import { classNames } from "@/components/ui/class-names";

export const inputLook =
  "w-full min-h-9 rounded-control border border-edge bg-surface px-3 py-1.5 text-text placeholder:text-muted disabled:opacity-45 aria-invalid:border-halt";

type Described = {
  readonly id: string;
  readonly "aria-describedby": string | undefined;
  readonly "aria-invalid": true | undefined;
};

export type FieldProps = {
  readonly label: string;
  readonly hint?: ReactNode;
  /** Why the value cannot be taken, as a sentence. */
  readonly error?: string | undefined;
  /** Stands before the label's end: "optional", a unit, a source. */
  readonly aside?: ReactNode;
  readonly className?: string;
  readonly children: (control: Described) => ReactNode;
};

/** Label above, control, then hint and error, tied together for assistive technology. */
export function Field({ label, hint, error, aside, className, children }: FieldProps) {
  const id = useId();
  const hintId = hint === undefined ? undefined : `${id}-hint`;
  const errorId = error === undefined ? undefined : `${id}-error`;
  const describedBy = [hintId, errorId].filter((part) => part !== undefined).join(" ");
  return (
    <div className={classNames("flex flex-col gap-1.5", className)}>
      <div className="flex items-baseline justify-between gap-3">
        <label htmlFor={id} className="font-strong">
          {label}
        </label>
        {aside === undefined ? null : <span className="text-sm text-muted">{aside}</span>}
      </div>
      {children({
        id,
        "aria-describedby": describedBy === "" ? undefined : describedBy,
        "aria-invalid": error === undefined ? undefined : true,
      })}
      {hintId === undefined ? null : (
        <div id={hintId} className="text-sm text-muted">
          {hint}
        </div>
      )}
      <div aria-live="polite" className="contents">
        {errorId === undefined ? null : (
          <div id={errorId} className="text-sm font-strong text-halt">
            {error}
          </div>
        )}
      </div>
    </div>
  );
}

type Worded = {
  readonly label: string;
  readonly hint?: ReactNode;
  readonly error?: string | undefined;
  readonly aside?: ReactNode;
};

export type TextFieldProps = Omit<ComponentProps<"input">, "id"> & Worded & { readonly fieldClassName?: string };

/** A field with a line of text. Works with react-hook-form's `register`. */
export function TextField({ label, hint, error, aside, className, fieldClassName, ...input }: TextFieldProps) {
  return (
    <Field label={label} hint={hint} error={error} aside={aside} className={fieldClassName}>
      {(control) => <input {...control} className={classNames(inputLook, className)} {...input} />}
    </Field>
  );
}

export type TextAreaFieldProps = Omit<ComponentProps<"textarea">, "id"> & Worded;

/** A field with several lines of text. */
export function TextAreaField({ label, hint, error, aside, className, ...area }: TextAreaFieldProps) {
  return (
    <Field label={label} hint={hint} error={error} aside={aside}>
      {(control) => <textarea {...control} rows={4} className={classNames(inputLook, className)} {...area} />}
    </Field>
  );
}

export type SelectOption = { readonly value: string; readonly label: string; readonly disabled?: boolean };
export type SelectFieldProps = Omit<ComponentProps<"select">, "id" | "children"> &
  Worded & { readonly options: readonly SelectOption[]; readonly fieldClassName?: string };

/** A field with a list to choose from: the system's own list, so it is at home on a phone. */
export function SelectField({
  label,
  hint,
  error,
  aside,
  options,
  className,
  fieldClassName,
  ...select
}: SelectFieldProps) {
  return (
    <Field label={label} hint={hint} error={error} aside={aside} className={fieldClassName}>
      {(control) => (
        <select {...control} className={classNames(inputLook, "pr-8", className)} {...select}>
          {options.map((option) => (
            <option key={option.value} value={option.value} disabled={option.disabled}>
              {option.label}
            </option>
          ))}
        </select>
      )}
    </Field>
  );
}
