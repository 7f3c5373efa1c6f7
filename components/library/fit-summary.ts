import { drawable } from "@/components/library/document-view";
import { fitOf } from "@/components/screens/fit-words";
import type { ProfileOutline } from "@/lib/contracts/profile";
import type { ScreenEnvelope } from "@/lib/timing/envelope";

export type FitSummary = { readonly severity: "fits" | "stop" | "note"; readonly words: string };

/** How the modes of a profile stand to a screen, in short. A profile without modes says nothing about rasters. */
export function fitSummary(outline: ProfileOutline, envelope: ScreenEnvelope): FitSummary {
  const timings = outline.modes.map((mode) => drawable(mode.timing)).filter((timing) => timing !== undefined);
  if (timings.length === 0) return { severity: "note", words: "names no modes" };
  const fitting = timings.filter((timing) => fitOf(timing, envelope).fits).length;
  if (fitting === timings.length) return { severity: "fits", words: "fits this screen" };
  if (timings.length === 1) return { severity: "stop", words: "its mode doesn’t fit" };
  return {
    severity: "stop",
    words: fitting === 0 ? "no mode fits" : `${timings.length - fitting} of ${timings.length} modes don’t fit`,
  };
}
