import { cleanFigure } from "@/lib/profile/clean-figure";
import type { NativeValue } from "@/lib/serial/native";
import type { SettingValue } from "./definition";

/** A value as a profile document holds it. */
export type NeutralValue = string | number | boolean;

/** Neutral paths that a driver may name, by what their value is. Source: the profile document, version 1. */
export const NEUTRAL_PATHS: Readonly<Record<string, "number" | "word" | "flag" | "text" | "mode-key">> = {
  "everywhere.trim.leftPx": "number", "everywhere.trim.rightPx": "number", "everywhere.trim.topLines": "number", "everywhere.trim.bottomLines": "number",
  "everywhere.powerOnSlot": "number",
  "modes[*].name": "text",
  "modes[*].timing.pixelClockHz": "number", "modes[*].timing.interlaced": "flag", "modes[*].timing.equalFields": "flag",
  ...Object.fromEntries(
    ["horizontal", "vertical"].flatMap((axis) => [
      ...["active", "frontPorch", "sync", "backPorch"].map((part) => [`modes[*].timing.${axis}.${part}`, "number"] as const),
      [`modes[*].timing.${axis}.polarity`, "word"] as const,
    ]),
  ),
  "slots[*].name": "text", "slots[*].input": "word", "slots[*].mode": "mode-key",
  "slots[*].placement.offsetPx": "number", "slots[*].placement.offsetLines": "number", "slots[*].placement.widthPct": "number", "slots[*].placement.heightPct": "number",
  "slots[*].syncKind": "word", "slots[*].outputKind": "word", "slots[*].inputRange": "word", "slots[*].lineFilter": "word",
  "slots[*].colour.brightnessPct": "number", "slots[*].colour.contrastPct": "number", "slots[*].colour.saturationPct": "number",
};

/** What a native value means, or undefined where the driver has no word for it. */
export function toNeutral(value: SettingValue, native: NativeValue): NeutralValue | undefined {
  if (value.type === "integer") return typeof native === "number" ? cleanFigure(native * value.scale + value.offset) : undefined;
  if (value.type === "text") return String(native);
  return value.choices.find((choice) => choice.native === native)?.neutral;
}

/** The native value nearest to a neutral one (ties up), or undefined where the driver has no word for it. Ranges are the check's affair. */
export function toNative(value: SettingValue, neutral: NeutralValue): NativeValue | undefined {
  if (value.type === "integer") {
    if (typeof neutral !== "number") return undefined;
    const steps = cleanFigure((neutral - value.offset) / value.scale - value.min) / value.step;
    return value.min + Math.floor(cleanFigure(steps) + 0.5) * value.step;
  }
  if (value.type === "text") return String(neutral);
  return value.choices.find((choice) => choice.neutral === neutral)?.native;
}
