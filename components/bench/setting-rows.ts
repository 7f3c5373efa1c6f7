import type { Finding } from "@/lib/profile/finding";
import type { DeviceLimits, NumberLimit } from "@/lib/profile/limits";
import type { Reach } from "@/lib/profile/also-moved";
import type { ProfileDocument } from "@/lib/profile/document";
import { neutralSettings, type NeutralSetting } from "@/lib/profile/neutral-settings";
import { choicesOf, numberLimit } from "@/lib/profile/round";
import { getValue, modePath, parsePath, slotPath } from "@/lib/profile/paths";

/** One setting as the page shows it: where it stands now, what is planned, what the device takes. */
export type SettingRow = {
  readonly path: string;
  readonly setting: NeutralSetting;
  readonly now: unknown;
  readonly planned: unknown;
  readonly range?: NumberLimit | undefined;
  readonly choices?: readonly string[] | undefined;
};

/** Timing is made on the Modes page and by whole rasters; on the bench only the porches are moved. */
const PORCHES = ["frontPorch", "backPorch"];

function reachOf(pattern: string): Reach {
  if (pattern.startsWith("slots[*]")) return "slot";
  return pattern.startsWith("modes[*]") ? "mode" : "everywhere";
}

function isAdjustable(setting: NeutralSetting): boolean {
  if (setting.kind === "key" || setting.kind === "text") return false;
  return !setting.pattern.startsWith("modes[*].timing.") || PORCHES.some((part) => setting.pattern.endsWith(part));
}

function pathOf(pattern: string, slot: number, modeKey: string): string {
  return pattern.replace("slots[*]", slotPath(slot)).replace("modes[*]", modePath(modeKey));
}

/**
 * The adjustable settings of one reach that the device has a word for.
 *
 * @param now the document read from the device
 * @param planned the same with the changes made so far
 * @param slot the chosen slot; its mode is the one that reach `mode` acts on
 */
export function settingRows(reach: Reach, now: ProfileDocument, planned: ProfileDocument, device: DeviceLimits, slot: number): SettingRow[] {
  const modeKey = getValue(planned, slotPath(slot, "mode"));
  if (reach === "mode" && typeof modeKey !== "string") return [];
  return neutralSettings
    .filter((setting) => reachOf(setting.pattern) === reach && isAdjustable(setting))
    .map((setting) => {
      const path = pathOf(setting.pattern, slot, typeof modeKey === "string" ? modeKey : "");
      return {
        path, setting, now: getValue(now, path), planned: getValue(planned, path),
        range: numberLimit(device, setting.pattern), choices: choicesOf(device, setting.pattern),
      };
    })
    .filter((row) => row.range !== undefined || row.choices !== undefined);
}

/** The findings that speak of exactly this value, or of the group or slot that it stands in. */
export function findingsAt(findings: readonly Finding[], path: string): readonly Finding[] {
  return findings.filter((finding) => finding.path === path || (path.startsWith(`${finding.path}.`) && parsePath(finding.path)?.fields.length !== 0));
}
