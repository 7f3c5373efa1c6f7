"use client";

import { useQuery } from "@tanstack/react-query";
import { screenPresets } from "@/lib/timing/screen-presets";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { useBenchAccount, useBenchCore } from "@/components/bench/bench-provider";

/** A screen to choose: one of the owner's, or a class of screens. */
export type ScreenChoice = { readonly key: string; readonly label: string; readonly id: string | null; readonly envelope: ScreenEnvelope };

const presetChoices: readonly ScreenChoice[] = screenPresets.map(({ id, envelope }) => ({
  key: `preset:${id}`, label: `Any ${envelope.name}`, id: null, envelope,
}));

/** The owner's screens first, then the classes of screens. */
export function useScreenChoices(): readonly ScreenChoice[] {
  const account = useBenchAccount();
  const { around } = useBenchCore();
  const { data } = useQuery({ queryKey: ["screens", "choices"], queryFn: () => around.server.screens(), enabled: account !== null });
  const own = (data ?? []).map((screen): ScreenChoice => ({ key: screen.id, label: screen.name, id: screen.id, envelope: screen.envelope }));
  return [...own, ...presetChoices];
}
