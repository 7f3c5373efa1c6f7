import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { hz, withUnit } from "@/lib/timing/figure-text";
import { modeName } from "@/lib/timing/mode-name";
import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";
import { fieldRateHz, lineTotal } from "@/lib/timing/rates";
import { closeSlip, type SlipCure } from "@/lib/timing/slip/close-slip";
import type { RateSlip } from "@/lib/timing/slip/rate-slip";
import { checkProfile } from "./check/check-profile";
import { PROFILE_FORMAT, PROFILE_VERSION, type ProfileDocument } from "./document";
import type { DocumentPatch, Finding, Remedy } from "./finding";
import { fitLimits } from "./fit-limits";
import type { DeviceLimits } from "./limits";
import { applyPatch, modePath, parsePath } from "./paths";

export type ModeCheck = {
  readonly timing: RasterTiming;
  readonly device?: DeviceLimits | undefined;
  readonly screen?: ScreenEnvelope | undefined;
  /** What arrives. */
  readonly source?: SourceFormat | undefined;
};

/** What these say is about a device or a slot, whatever raster it has; slip is told below, with what closes it. */
const notOfARaster = new Set(["screen.idle", "unknown.device", "device.firmware", "device.input", "rate.slip"]);

/** Cures offered at most. */
const MAX_CURES = 2;

function documentOf(key: string, timing: RasterTiming): ProfileDocument {
  // A slot that shows it: the checks speak of modes that something uses.
  return {
    format: PROFILE_FORMAT,
    version: PROFILE_VERSION,
    modes: [{ key, timing }],
    slots: [{ number: 1, mode: key }],
  };
}

const ofModeAlone = (remedy: Remedy) =>
  remedy.kind === "set" && remedy.patch.every(({ path }) => parsePath(path)?.scope === "mode");

/** "18 s", "17 minutes", "5 hours" */
export function intervalText(seconds: number): string {
  if (seconds < 10) return withUnit(seconds, "s", seconds < 1 ? 2 : 1);
  if (seconds < 120) return withUnit(seconds, "s", 0);
  return seconds < 7200 ? withUnit(seconds / 60, "minutes", 0) : withUnit(seconds / 3600, "hours", 0);
}

/** "repeats every 18 s", "drops every 52 s", or that there is none. */
export function slipText(slip: RateSlip): string {
  return slip.everyS === undefined ? "none" : `${slip.kind} every ${intervalText(slip.everyS)}`;
}

function cureRemedy(key: string, cure: SlipCure): Remedy {
  const { timing } = cure;
  const patch: DocumentPatch[] = [
    { path: modePath(key, "timing.pixelClockHz"), value: timing.pixelClockHz },
    { path: modePath(key, "timing.horizontal.backPorch"), value: timing.horizontal.backPorch },
  ];
  const how = `${withUnit(timing.pixelClockHz / 1e6, "MHz")}, ${withUnit(lineTotal(timing), "clocks")}`;
  return { kind: "set", label: `Use ${how}: ${slipText(cure.slip)}`, patch };
}

/** Slip between what arrives and what leaves, with the clocks that bring the two nearer on this device and screen. */
function slipFinding(key: string, { timing, device, screen, source }: ModeCheck): Finding[] {
  if (source === undefined || device?.outputClock === "input") return [];
  const cures = closeSlip(timing, source.fieldRateHz, device === undefined ? {} : fitLimits(device), screen);
  const { everyS, kind } = cures.now;
  if (everyS === undefined) return [];
  return [
    {
      rule: "rate.slip",
      path: modePath(key, "timing"),
      severity: "note",
      measured: everyS,
      unit: "s",
      sentence: `A frame ${kind} every ${intervalText(everyS)}.`,
      detail: `${hz(source.fieldRateHz, 3)} comes in, ${hz(fieldRateHz(timing), 3)} goes out.`,
      slots: [],
      remedies: cures.cures.slice(0, MAX_CURES).map((cure) => cureRemedy(key, cure)),
    },
  ];
}

/**
 * What the checks say of one raster by itself: envelope, blanking, clamp, what a device can hold, slip. Remedies patch
 * the mode that `patchedMode` takes them to.
 * @param check its timing without `rasterProblems`
 */
export function modeFindings(check: ModeCheck): Finding[] {
  const { timing, device, screen, source } = check;
  const key = modeName(timing);
  const found = checkProfile({ document: documentOf(key, timing), device, screen, source });
  return [
    ...found
      .filter(({ rule }) => !notOfARaster.has(rule))
      .map((finding) => ({ ...finding, slots: [], remedies: finding.remedies.filter(ofModeAlone) })),
    ...slipFinding(key, check),
  ];
}

/** The raster after a remedy of `modeFindings`. */
export function patchedMode(timing: RasterTiming, remedy: Remedy): RasterTiming {
  if (remedy.kind !== "set") return timing;
  return applyPatch(documentOf(modeName(timing), timing), remedy.patch).modes?.[0]?.timing ?? timing;
}
