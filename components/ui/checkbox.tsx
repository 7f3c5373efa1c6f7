"use client";

import { Check } from "lucide-react";
import { Checkbox as Primitive } from "radix-ui";
import { useId } from "react";
import type { ReactNode } from "react";

export type CheckboxProps = {
  readonly checked: boolean;
  readonly onChange: (checked: boolean) => void;
  readonly label: ReactNode;
  readonly hint?: ReactNode;
  readonly disabled?: boolean;
  readonly name?: string;
};

/** A box to tick, its label and what it means. */
export function Checkbox({ checked, onChange, label, hint, disabled, name }: CheckboxProps) {
  const id = useId();
  const hintId = `${id}-hint`;
  return (
    <div className="flex items-start gap-2.5 py-0.5">
      <Primitive.Root
        id={id}
        name={name}
        checked={checked}
        disabled={disabled}
        aria-describedby={hint === undefined ? undefined : hintId}
        onCheckedChange={(state) => onChange(state === true)}
        className="mt-px flex size-5 shrink-0 items-center justify-center rounded-[4px] border border-edge bg-surface disabled:opacity-45 data-[state=checked]:border-text data-[state=checked]:bg-text"
      >
        <Primitive.Indicator className="text-bg">
          <Check aria-hidden size={15} strokeWidth={3} />
        </Primitive.Indicator>
      </Primitive.Root>
      <div>
        <label htmlFor={id}>
          {label}
        </label>
        {hint === undefined ? null : (
          <div id={hintId} className="text-sm text-muted">
            {hint}
          </div>
        )}
      </div>
    </div>
  );
}
