import { rasterProblems } from "@/lib/timing/raster-problems";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { SourceFormat } from "@/lib/timing/raster";
import type { ProfileDocument } from "@/lib/profile/document";
import type { Finding } from "@/lib/profile/finding";
import type { DeviceLimits } from "@/lib/profile/limits";
import { slotPath } from "@/lib/profile/paths";
import { checkProfile } from "./check-profile";
import { idleFinding } from "./idle";

export type RecallInput = {
  /** What working memory holds now. */
  readonly document: ProfileDocument;
  readonly slot: number;
  readonly device: DeviceLimits;
  /** Absent: unknown, and the page asks before it recalls. */
  readonly screen?: ScreenEnvelope | undefined;
  readonly source?: SourceFormat | null | undefined;
  /** Nothing arrives on the slot's input, so the device's idle raster is what comes out. */
  readonly nothingArrives: boolean;
};

/** Families that say something about a slot that is only made active: what it holds is stored already. */
const judged = ["shape.", "screen.", "blanking.", "sync."];
const alsoJudged = ["device.input", "unknown.screen"];

function isAbout(finding: Finding): boolean {
  if (finding.rule === "screen.idle") return false;
  return judged.some((family) => finding.rule.startsWith(family)) || alsoJudged.includes(finding.rule);
}

/** The raster that comes out while nothing arrives: here it is what the screen gets, so outside is a stop. */
function idleFindings({ device, screen, slot }: RecallInput): Finding[] {
  const raster = device.idle.withoutInput;
  if (raster === "unknown" || rasterProblems(raster).length > 0) {
    return [
      {
        rule: "screen.idle",
        path: "device.idle.withoutInput",
        severity: "caution",
        sentence: `Nothing arrives for slot ${slot}, and nobody knows what ${device.name} puts out then.`,
        detail: "Keep the screen unplugged until the device's raster was read and fits.",
        limitSource: "driver",
        slots: [slot],
        remedies: [],
      },
    ];
  }
  if (!screen) return [];
  return idleFinding(device, screen, ["withoutInput"]).map((finding) => ({
    ...finding,
    severity: "stop",
    detail: `Nothing arrives for slot ${slot}, so this raster comes out. ${finding.detail ?? ""}`,
    slots: [slot],
  }));
}

/**
 * What making a slot active would put on the screen: its mode, its sync, and where nothing arrives the idle raster.
 *
 * Recalling is not a write, so nothing else is judged, and no finding has a remedy.
 */
export function checkRecall(input: RecallInput): Finding[] {
  const { document, device, screen, source } = input;
  const slot = document.slots?.find(({ number }) => number === input.slot);
  if (slot?.mode === undefined) {
    return [
      {
        rule: "shape.mode-missing",
        path: slotPath(input.slot, "mode"),
        severity: "stop",
        sentence: `Slot ${input.slot} is empty: it has no mode to put out.`,
        slots: [input.slot],
        remedies: [],
      },
    ];
  }
  const alone: ProfileDocument = {
    ...document,
    slots: [slot],
    modes: document.modes?.filter(({ key }) => key === slot.mode),
  };
  const found = checkProfile({ document: alone, device, screen, source: input.nothingArrives ? null : source }).filter(
    isAbout,
  );
  return [...(input.nothingArrives ? idleFindings(input) : []), ...found].map((finding) => ({
    ...finding,
    remedies: [],
  }));
}
