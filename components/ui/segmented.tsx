"use client";

import { RadioGroup, Tabs } from "radix-ui";
import type { ReactNode } from "react";
import { classNames } from "@/components/ui/class-names";

export type Choice<V extends string> = { readonly value: V; readonly label: ReactNode; readonly disabled?: boolean };

const groupLook = "flex w-full rounded-control border border-edge";
// Of type: inside a form each choice is followed by a hidden input.
const itemLook =
  "min-h-9 flex-1 border-r border-edge px-3 py-1.5 text-center font-button text-muted first-of-type:rounded-l-[6px] last-of-type:rounded-r-[6px] last-of-type:border-r-0 enabled:hover:text-text disabled:opacity-45";

export type SegmentedProps<V extends string> = {
  /** Name of the group for assistive technology. */
  readonly label: string;
  readonly value: V;
  readonly choices: readonly Choice<V>[];
  readonly onChange: (value: V) => void;
  readonly disabled?: boolean;
  readonly className?: string;
};

/** One of a few, all of them in sight; arrow keys move the choice. */
export function Segmented<V extends string>({
  label,
  value,
  choices,
  onChange,
  disabled,
  className,
}: SegmentedProps<V>) {
  return (
    <RadioGroup.Root
      aria-label={label}
      value={value}
      disabled={disabled}
      orientation="horizontal"
      onValueChange={(next) => {
        const choice = choices.find((candidate) => candidate.value === next);
        if (choice !== undefined) onChange(choice.value);
      }}
      className={classNames(groupLook, className)}
    >
      {choices.map((choice) => (
        <RadioGroup.Item
          key={choice.value}
          value={choice.value}
          disabled={choice.disabled}
          className={classNames(itemLook, "data-[state=checked]:bg-text data-[state=checked]:text-bg")}
        >
          {choice.label}
        </RadioGroup.Item>
      ))}
    </RadioGroup.Root>
  );
}

export type TabPage<V extends string> = Choice<V> & { readonly content: ReactNode };
export type TabsProps<V extends string> = {
  readonly label: string;
  readonly value: V;
  readonly pages: readonly TabPage<V>[];
  readonly onChange: (value: V) => void;
};

/** Several pages in one place, under a rule; only the chosen one is there. */
export function TabPages<V extends string>({ label, value, pages, onChange }: TabsProps<V>) {
  return (
    <Tabs.Root
      value={value}
      onValueChange={(next) => {
        const page = pages.find((candidate) => candidate.value === next);
        if (page !== undefined) onChange(page.value);
      }}
    >
      <Tabs.List aria-label={label} className="flex gap-6 overflow-x-auto border-b border-line">
        {pages.map((page) => (
          <Tabs.Trigger
            key={page.value}
            value={page.value}
            disabled={page.disabled}
            className="-mb-px whitespace-nowrap border-b-2 border-transparent py-2 font-button text-muted hover:text-text focus-visible:-outline-offset-2 data-[state=active]:border-lamp data-[state=active]:text-text"
          >
            {page.label}
          </Tabs.Trigger>
        ))}
      </Tabs.List>
      {pages.map((page) => (
        <Tabs.Content key={page.value} value={page.value} className="pt-4">
          {page.content}
        </Tabs.Content>
      ))}
    </Tabs.Root>
  );
}
