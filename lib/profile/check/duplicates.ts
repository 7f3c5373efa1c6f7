import type { ProfileDocument } from "@/lib/profile/document";
import type { Finding } from "@/lib/profile/finding";
import { modePath, slotPath } from "@/lib/profile/paths";

function repeated<T>(values: readonly T[]): T[] {
  return [...new Set(values.filter((value, index) => values.indexOf(value) !== index))];
}

/** Two slots with one number, two modes with one key: nobody can tell which is meant. */
export function duplicateFindings(document: ProfileDocument): Finding[] {
  const slots = repeated((document.slots ?? []).map((slot) => slot.number));
  const modes = repeated((document.modes ?? []).map((mode) => mode.key));
  return [
    ...slots.map((number): Finding => ({
      rule: "shape.duplicate-slot",
      path: slotPath(number),
      severity: "stop",
      measured: number,
      sentence: `Two slots have the number ${number}.`,
      detail: "Each slot stands once in a document.",
      slots: [number],
      remedies: [{ kind: "leave-out", label: `Leave slot ${number} out`, slot: number }],
    })),
    ...modes.map((key): Finding => ({
      rule: "shape.duplicate-mode",
      path: modePath(key),
      severity: "stop",
      measured: key,
      sentence: `Two modes have the key “${key}”.`,
      detail: "Each mode stands once in a document.",
      slots: (document.slots ?? []).filter((slot) => slot.mode === key).map((slot) => slot.number),
      remedies: [],
    })),
  ];
}
