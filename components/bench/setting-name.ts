import { neutralSetting } from "@/lib/profile/neutral-settings";
import { parsePath, patternOf } from "@/lib/profile/paths";
import type { DriverDefinition } from "@/lib/serial/driver/definition";

/** "Slot 4, Horizontal position": a native key or document path in words. */
export function settingName(key: string, driver?: DriverDefinition): string {
  const pattern = patternOf(key) ?? key;
  const label = neutralSetting(pattern)?.label ?? driver?.settings.find((setting) => setting.key === pattern)?.label ?? key;
  const parsed = parsePath(key);
  if (parsed?.scope === "slot") return `Slot ${parsed.number}, ${label}`;
  return parsed?.scope === "mode" ? `Mode ${parsed.key}, ${label}` : label;
}
