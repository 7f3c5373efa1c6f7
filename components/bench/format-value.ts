import { formatFigure, formatNumber, withUnit } from "@/components/ui/figures";
import type { NeutralSetting } from "@/lib/profile/neutral-settings";

const WORDS: Readonly<Record<string, string>> = { onGreen: "on green", onLuma: "on luma" };

/** A value of a setting as it stands on screen; "not named" where there is none. */
export function formatSetting(value: unknown, setting: Pick<NeutralSetting, "pattern" | "unit"> | undefined, unit = setting?.unit ?? ""): string {
  if (value === undefined || value === null) return "not named";
  if (typeof value === "boolean") return value ? "yes" : "no";
  if (typeof value === "string") return WORDS[value] ?? (value === "" ? "empty" : value);
  if (typeof value !== "number") return "…";
  if (setting?.pattern.endsWith("pixelClockHz")) return formatFigure(value / 1e6, "MHz", { decimals: 3 });
  if (unit === "%") return withUnit(formatNumber(value, { decimals: 1 }), unit);
  return formatFigure(value, unit, { decimalsAtMost: 2 });
}
