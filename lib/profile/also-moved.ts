import type { ProfileDocument } from "./document";

/** What a setting acts on. */
export type Reach = "everywhere" | "mode" | "slot";

/** Slots that a change of this reach moves besides the chosen one. */
export function alsoMoved(reach: Reach, document: ProfileDocument, slot: number): readonly number[] {
  const slots = document.slots ?? [];
  const modeKey = slots.find((one) => one.number === slot)?.mode;
  if (reach === "slot") return [];
  const moved = reach === "everywhere" ? slots.filter((one) => one.mode !== undefined) : slots.filter((one) => one.mode === modeKey && modeKey !== undefined);
  return moved.map((one) => one.number).filter((number) => number !== slot);
}
