import { rasterProblems } from "@/lib/timing/raster-problems";
import { sameRaster } from "@/lib/timing/same-raster";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { DeviceLimits } from "@/lib/profile/limits";
import type { Finding } from "@/lib/profile/finding";
import { listText } from "@/lib/profile/words";
import type { CheckContext } from "./context";
import { brokenScreenLimits, screenFinding } from "./screen";

export type IdleMoment = keyof DeviceLimits["idle"];

export const idleMoments: Readonly<Record<IdleMoment, string>> = {
  switchOn: "at switch-on",
  withoutInput: "without input",
  afterReset: "after reset",
};

const unplug = "Keep the screen unplugged until the device's raster was read and fits.";
const moments = Object.keys(idleMoments) as IdleMoment[]; // the record's own keys

/** The raster that a device puts out on its own at some moments, which all have the same one, against the screen. */
export function idleFinding(
  device: DeviceLimits,
  screen: ScreenEnvelope,
  at: readonly [IdleMoment, ...IdleMoment[]],
): Finding[] {
  const raster = device.idle[at[0]];
  if (raster === "unknown" || rasterProblems(raster).length > 0) return [];
  return brokenScreenLimits(raster, screen).map((found) => {
    const finding = screenFinding(found, `The raster ${listText(at.map((moment) => idleMoments[moment]))}`, screen);
    return {
      ...finding,
      rule: "screen.idle",
      path: `device.idle.${at[0]}.${found.rule}`,
      severity: "caution",
      detail: `${finding.detail} ${unplug}`,
      slots: [],
      remedies: [],
    };
  });
}

/** Moments by the raster that is out then: most devices have one for all. */
function momentsByRaster(device: DeviceLimits): [IdleMoment, ...IdleMoment[]][] {
  const groups: [IdleMoment, ...IdleMoment[]][] = [];
  for (const moment of moments) {
    const raster = device.idle[moment];
    const equal = groups.find(([first]) => {
      const other = device.idle[first];
      return raster !== "unknown" && other !== "unknown" && sameRaster(raster, other);
    });
    if (equal) equal.push(moment);
    else groups.push([moment]);
  }
  return groups;
}

function unknownIdle(device: DeviceLimits): Finding[] {
  const unknown = moments.filter((moment) => device.idle[moment] === "unknown");
  if (unknown.length === 0) return [];
  return [
    {
      rule: "screen.idle",
      path: "device.idle",
      severity: "caution",
      sentence: `Nobody knows what ${device.name} puts out ${listText(unknown.map((moment) => idleMoments[moment]))}.`,
      detail: unplug,
      limitSource: "driver",
      slots: [],
      remedies: [],
    },
  ];
}

/** `screen` idle: what the device puts out before and besides its slots. Not part of what a plan calls allowed. */
export function idleFindings({ device, screen }: CheckContext): Finding[] {
  if (!device || !screen) return [];
  return [...momentsByRaster(device).flatMap((at) => idleFinding(device, screen, at)), ...unknownIdle(device)];
}
