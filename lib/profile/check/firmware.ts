import type { Finding } from "@/lib/profile/finding";
import type { CheckContext } from "./context";

/** Compares "3.2" and "3.10" part by part; a part that is no number counts as 0. */
export function compareVersions(left: string, right: string): number {
  const [a, b] = [left, right].map((version) => version.split(".").map((part) => Number.parseInt(part, 10) || 0));
  const length = Math.max(a?.length ?? 0, b?.length ?? 0);
  for (let index = 0; index < length; index += 1) {
    const difference = (a?.[index] ?? 0) - (b?.[index] ?? 0);
    if (difference !== 0) return difference;
  }
  return 0;
}

/** `device` firmware: a version that the driver was not made for. */
export function firmwareFindings({ device }: CheckContext): Finding[] {
  const running = device?.firmware.running;
  if (!device || running === undefined) return [];
  const { min, max } = device.firmware;
  if (compareVersions(running, min) >= 0 && compareVersions(running, max) <= 0) return [];
  return [
    {
      rule: "device.firmware",
      path: "device.firmware",
      severity: "caution",
      measured: running,
      limit: `${min} to ${max}`,
      sentence: `Firmware ${running} is outside the versions that the driver was made for.`,
      detail: `It was made for ${min === max ? min : `${min} to ${max}`}; another version may hold its settings elsewhere.`,
      limitSource: "driver",
      slots: [],
      remedies: [],
    },
  ];
}
