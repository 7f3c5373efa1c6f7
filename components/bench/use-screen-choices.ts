"use client";

import { useQuery } from "@tanstack/react-query";
import { screenPresets } from "@/lib/timing/screen-presets";
import type { ScreenChoice } from "@/components/bench/store/screens";
import { useBenchAccount, useBenchCore } from "@/components/bench/bench-provider";


const presetChoices: readonly ScreenChoice[] = screenPresets.map(({ id, envelope }) => ({
  key: `preset:${id}`, label: `Any ${envelope.name}`, id: null, presetId: id, envelope,
}));

/** The owner's screens first, then the classes of screens. */
export function useScreenChoices(): readonly ScreenChoice[] {
  const account = useBenchAccount();
  const { around } = useBenchCore();
  const { data } = useQuery({ queryKey: ["screens", "choices"], queryFn: () => around.server.screens(), enabled: account !== null });
  const own = (data ?? []).map((screen): ScreenChoice => ({ key: screen.id, label: screen.name, id: screen.id, presetId: screen.presetId, envelope: screen.envelope }));
  return [...own, ...presetChoices];
}
