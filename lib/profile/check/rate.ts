import { fieldRateHz } from "@/lib/timing/rates";
import { rateSlip } from "@/lib/timing/slip/rate-slip";
import type { Finding } from "@/lib/profile/finding";
import { slotPath } from "@/lib/profile/paths";
import { fieldRateText, withUnit } from "@/lib/profile/words";
import type { CheckContext } from "./context";

/** "18 s", "17 minutes", "5 hours" */
function intervalText(seconds: number): string {
  if (seconds < 120) return withUnit(seconds, "s", seconds < 10 ? 1 : 0);
  if (seconds < 7200) return `${Math.round(seconds / 60)} minutes`;
  return `${Math.round(seconds / 3600)} hours`;
}

/** `rate`: in and out differ, so a frame drops or repeats every n s (n = 1 / difference). */
export function rateFindings(context: CheckContext): Finding[] {
  if (context.device?.outputClock === "input") return [];
  return context.slots.flatMap(({ number, timing, source }): Finding[] => {
    if (!timing || !source) return [];
    const out = fieldRateHz(timing);
    const { kind, everyS } = rateSlip(source.fieldRateHz, out);
    if (everyS === undefined) return [];
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
        remedies: [],
      },
    ];
  });
}
