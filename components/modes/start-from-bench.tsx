"use client";

import { useEffect, useRef } from "react";
import { useBench, useHasBench } from "@/components/bench/bench-provider";
import { useModesActs } from "@/components/modes/modes-context";
import { deviceBySlug } from "@/components/modes/store/link";
import { screenPresets } from "@/lib/timing/screen-presets";

/** A page that was opened without a link begins with what stands on the bench: device, screen, what arrives. */
export function StartFromBench() {
  return useHasBench() ? <Start /> : null;
}

function Start() {
  const slug = useBench((state) => state.device?.driver.slug ?? null);
  const arriving = useBench((state) => state.reading?.arriving?.format ?? null);
  const screen = useBench((state) => (state.screen.kind === "known" ? state.screen : null));
  const { chooseDevice, chooseScreen, chooseSource } = useModesActs();
  const begun = useRef(false);
  useEffect(() => {
    if (begun.current) return;
    begun.current = true;
    const device = slug === null ? undefined : deviceBySlug(slug);
    if (device !== undefined) chooseDevice(device);
    if (arriving !== null) chooseSource(arriving);
    const id = screen?.id ?? screenPresets.find(({ envelope }) => envelope.name === screen?.envelope.name)?.id;
    if (screen !== null && id !== undefined) chooseScreen({ id, envelope: screen.envelope });
  }, [slug, arriving, screen, chooseDevice, chooseScreen, chooseSource]);
  return null;
}
