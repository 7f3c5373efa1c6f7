import type { SimulatedScreen } from "@/lib/picture/simulated-screen";

const WORDS: Record<SimulatedScreen["why"][number], string> = {
  "line-rate": "its line rate is outside the screen's bands",
  "field-rate": "its field rate is outside the screen's bands",
  interlace: "the screen takes no interlaced raster",
  clock: "its pixel clock is above the screen's",
  sync: "its sync is shorter than the screen takes",
  "back-porch": "its back porch is shorter than the screen takes",
  "field-blank": "its field blanking is shorter than the screen takes",
  "no-raster": "nothing is put out",
  "no-sync": "it has no sync",
  "sync-kind": "the screen takes no sync of this kind",
  "nothing-left": "trim takes the whole picture away",
  "nothing-inside": "no part of the picture lies in the raster",
};

/** Whether the screen locks, and why not, in a sentence. */
export function lockWords(simulated: SimulatedScreen, isKnown: boolean): string {
  const why = simulated.why.map((one) => WORDS[one]).join("; ");
  if (!simulated.locked) return `The screen does not lock: ${why}.`;
  if (why !== "") return `The screen locks, but ${why}.`;
  return isKnown ? "The screen locks." : "No screen is chosen: this is how one that takes this raster would show it.";
}
