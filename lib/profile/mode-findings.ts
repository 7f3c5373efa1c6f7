import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { hz } from "@/lib/timing/figure-text";
import { modeName } from "@/lib/timing/mode-name";
import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";
import { fieldRateHz } from "@/lib/timing/rates";
import { rateSlip } from "@/lib/timing/slip/rate-slip";
import { checkProfile } from "./check/check-profile";
import { PROFILE_FORMAT, PROFILE_VERSION, type ProfileDocument } from "./document";
import type { Finding, Remedy } from "./finding";
import type { DeviceLimits } from "./limits";
import { applyPatch, modePath, parsePath } from "./paths";
import { intervalText, slipRemedies } from "./slip-remedies";

export type ModeCheck = {
  readonly timing: RasterTiming;
  readonly device?: DeviceLimits | undefined;
  readonly screen?: ScreenEnvelope | undefined;
  /** What arrives. */
  readonly source?: SourceFormat | undefined;
};

/** What these say is about a device or a slot, whatever raster it has; slip is told below, with what closes it. */
const notOfARaster = new Set(["screen.idle", "unknown.device", "device.firmware", "device.input", "rate.slip"]);

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

/** Slip between what arrives and what leaves, with the clocks that bring the two nearer on this device and screen. */
function slipFinding(key: string, { timing, device, screen, source }: ModeCheck): Finding[] {
  if (source === undefined || device?.outputClock === "input") return [];
  const { everyS, kind } = rateSlip(source.fieldRateHz, fieldRateHz(timing));
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
      remedies: slipRemedies(key, timing, source.fieldRateHz, { device, screen }),
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
