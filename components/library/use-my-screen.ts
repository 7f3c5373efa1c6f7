"use client";

import { useScreens } from "@/components/screens/use-screens";
import type { SelectOption } from "@/components/ui/field";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { screenPresets } from "@/lib/timing/screen-presets";

export type ScreenOption = SelectOption & {
  readonly envelope: ScreenEnvelope | null;
  /** One of the owner's own; the server can list by it. */
  readonly ownId: string | null;
};

const noScreen: ScreenOption = { value: "", label: "No screen", envelope: null, ownId: null };

/** What profiles can be held against: the owner's screens, then the standard envelopes. */
export function useScreenOptions(): readonly ScreenOption[] {
  const { data } = useScreens();
  const own = (data ?? []).map(({ id, name, envelope }): ScreenOption => ({
    value: id,
    label: name,
    envelope,
    ownId: id,
  }));
  const standard = screenPresets.map(({ id, envelope }): ScreenOption => ({
    value: id,
    label: `Any ${envelope.name}`,
    envelope,
    ownId: null,
  }));
  return [noScreen, ...own, ...standard];
}

/** The option that an address names; without one the owner's first screen, else none. */
export function chosenScreen(options: readonly ScreenOption[], wanted: string | null): ScreenOption {
  const named =
    wanted === null
      ? options.find((option) => option.ownId !== null)
      : options.find((option) => option.value === wanted);
  return named ?? noScreen;
}
