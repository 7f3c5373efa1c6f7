import { formatCount } from "@/components/ui/figures";
import type { BackupView } from "@/lib/contracts/backup";
import type { DeviceView } from "@/lib/contracts/device";
import { formatFieldRate, formatLineRate } from "@/components/ui/figures";
import type { RasterTiming } from "@/lib/timing/raster";
import { fieldRateHz, lineRateHz } from "@/lib/timing/rates";

export const causeWords: Readonly<Record<BackupView["cause"], string>> = {
  "by-hand": "by hand",
  "before-run": "before a run",
  "after-run": "after a run",
};

/** What changed since the backup before it, in short. */
export function changedWords(changedValues: number | null): string {
  if (changedValues === null) return "the first";
  return changedValues === 0 ? "nothing changed" : formatCount(changedValues, "value changed", "values changed");
}

/** "Lanternfield LF-8, firmware 3.2, simulated" */
export function deviceWords(device: Pick<DeviceView, "maker" | "model" | "firmware" | "simulated">): string {
  return `${device.maker} ${device.model}, firmware ${device.firmware}${device.simulated ? ", simulated" : ""}`;
}

/** "15.734 kHz, 60.05 Hz" */
export function rasterWords(raster: RasterTiming): string {
  return `${formatLineRate(lineRateHz(raster))}, ${formatFieldRate(fieldRateHz(raster))}`;
}

export type Standing = { readonly severity: "fits" | "caution" | "note"; readonly words: string };

/** How the last backup stands to the pinned one. */
export function standingOf(
  device: Pick<DeviceView, "knownGoodBackupId" | "differsFromKnownGood" | "lastBackup">,
): Standing {
  if (device.lastBackup === null) return { severity: "caution", words: "never backed up" };
  if (device.knownGoodBackupId === null) return { severity: "note", words: "no backup is known good" };
  return device.differsFromKnownGood === true
    ? { severity: "caution", words: "differs from known good" }
    : { severity: "fits", words: "as known good" };
}
