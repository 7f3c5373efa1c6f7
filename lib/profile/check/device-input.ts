import type { SourceFormat } from "@/lib/timing/raster";
import { inSpan } from "@/lib/timing/span";
import type { Finding } from "@/lib/profile/finding";
import type { AcceptedFormat, DeviceLimits } from "@/lib/profile/limits";
import { slotPath } from "@/lib/profile/paths";
import { fieldRateText } from "@/lib/profile/words";
import type { CheckContext } from "./context";
import { leaveOut, setValue } from "./remedies";

type Input = DeviceLimits["inputs"][number];

function covers(format: AcceptedFormat, source: SourceFormat): boolean {
  return (
    (format.activeLines === undefined || inSpan(source.activeLines, format.activeLines)) &&
    (format.interlaced === undefined || format.interlaced === source.interlaced) &&
    (format.fieldRateHz === undefined || inSpan(source.fieldRateHz, format.fieldRateHz))
  );
}

/** Whether an input locks to a source: by the first of its formats that covers it; one that none covers is unknown. */
export function inputLocks(input: Input, source: SourceFormat): AcceptedFormat["locks"] {
  return input.accepts.find((format) => covers(format, source))?.locks ?? "unknown";
}

/** "1 280 × 720, progressive, 60.000 Hz" */
export function sourceText(source: SourceFormat): string {
  return `${source.activePx} × ${source.activeLines}, ${source.interlaced ? "interlaced" : "progressive"}, ${fieldRateText(source.fieldRateHz)}`;
}

/** `device` input: a source that a slot's input does not lock to, or of which nobody knows whether it does. */
export function deviceInputFindings(context: CheckContext): Finding[] {
  const { device } = context;
  if (!device) return [];
  return context.slots.flatMap(({ number, slot, source }): Finding[] => {
    const input = device.inputs.find(({ name }) => name === slot.input);
    if (!input || !source) return [];
    const locks = inputLocks(input, source);
    if (locks === "locks") return [];
    const others = device.inputs.filter((other) => inputLocks(other, source) === "locks").slice(0, 2);
    const path = slotPath(number, "input");
    const refuses = locks === "does-not-lock";
    return [
      {
        rule: "device.input",
        path,
        severity: refuses ? "stop" : "caution",
        measured: sourceText(source),
        sentence: refuses
          ? `${input.label} does not lock to what slot ${number} expects.`
          : `Nobody knows whether ${input.label} locks to what slot ${number} expects.`,
        detail: `It expects ${sourceText(source)}.`,
        limitSource: "driver",
        slots: [number],
        remedies: [...others.map((other) => setValue(`Use ${other.label}`, path, other.name)), leaveOut(number)],
      },
    ];
  });
}
