import { fieldRateHz } from "@/lib/timing/rates";
import { rateSlip } from "@/lib/timing/slip/rate-slip";
import type { Finding } from "@/lib/profile/finding";
import { slotPath } from "@/lib/profile/paths";
import { intervalText, slipRemedies } from "@/lib/profile/slip-remedies";
import { fieldRateText } from "@/lib/profile/words";
import type { CheckContext } from "./context";

/** `rate`: in and out differ, so a frame drops or repeats every n s (n = 1 / difference). */
export function rateFindings(context: CheckContext): Finding[] {
  if (context.device?.outputClock === "input") return [];
  return context.slots.flatMap(({ number, slot, timing, source }): Finding[] => {
    if (!timing || !source) return [];
    const out = fieldRateHz(timing);
    const { kind, everyS } = rateSlip(source.fieldRateHz, out);
    if (everyS === undefined) return [];
    // A mode that no changed slot shows is not this document's to change.
    const mode = context.modes.find(({ key, changedUsers }) => key === slot.mode && changedUsers.length > 0);
    return [
      {
        rule: "rate.slip",
        path: slotPath(number, "mode"),
        severity: "note",
        measured: everyS,
        unit: "s",
        sentence: `A frame ${kind} every ${intervalText(everyS)} in slot ${number}.`,
        detail: `${fieldRateText(source.fieldRateHz)} comes in, ${fieldRateText(out)} goes out.`,
        slots: [number],
        remedies: mode ? slipRemedies(mode.key, timing, source.fieldRateHz, context) : [],
      },
    ];
  });
}
