import { modeName } from "@/lib/timing/mode-name";
import { activeFrameLines, fieldRateHz, lineRateHz } from "@/lib/timing/rates";
import type { RasterTiming } from "@/lib/timing/raster";
import type { Remedy } from "@/lib/profile/finding";
import { slotPath } from "@/lib/profile/paths";
import { isRasterAllowed } from "./allowed-raster";
import type { CheckContext, JudgedMode } from "./context";

/** More ways than anybody weighs against one another. */
const MAX_OTHER_MODES = 3;
const MAX_LEAVE_OUT = 8;

export function leaveOut(slot: number): Remedy {
  return { kind: "leave-out", label: `Leave slot ${slot} out`, slot };
}

export function leaveOutAll(slots: readonly number[]): Remedy[] {
  return slots.slice(0, MAX_LEAVE_OUT).map(leaveOut);
}

/** "240p60 (mode 3)" */
export function modeText(key: string, timing: RasterTiming): string {
  return `${modeName(timing)} (mode ${key})`;
}

/** How unlike two rasters are: lines of the picture first, then field rate, then line rate. */
function unlike(timing: RasterTiming, wanted: RasterTiming): readonly number[] {
  return [
    Math.abs(activeFrameLines(timing) - activeFrameLines(wanted)),
    Math.abs(fieldRateHz(timing) - fieldRateHz(wanted)),
    Math.abs(lineRateHz(timing) - lineRateHz(wanted)),
  ];
}

function byLikeness(wanted: RasterTiming | undefined) {
  return (a: { timing: RasterTiming }, b: { timing: RasterTiming }): number => {
    if (!wanted) return 0;
    const [left, right] = [unlike(a.timing, wanted), unlike(b.timing, wanted)];
    const at = left.findIndex((value, index) => value !== right[index]);
    return at < 0 ? 0 : (left[at] ?? 0) - (right[at] ?? 0);
  };
}

function isTimed(mode: JudgedMode): mode is TimedMode {
  return mode.timing !== undefined;
}

type TimedMode = JudgedMode & { readonly timing: RasterTiming };

const usable = new WeakMap<CheckContext, readonly TimedMode[]>();

/** Modes that the screen and the device take: judged once a check, since every finding of a mode asks. */
function usableModes(context: CheckContext): readonly TimedMode[] {
  const known = usable.get(context);
  if (known !== undefined) return known;
  const modes = context.modes
    .filter(isTimed)
    .filter((mode) => isRasterAllowed(mode.timing, context.screen))
    .filter((mode) => context.device?.interlace !== false || !mode.timing.interlaced);
  usable.set(context, modes);
  return modes;
}

/**
 * Points slots to another mode of the document that the screen takes, the likest first.
 *
 * @param instead a mode that is not offered: the one that does not fit
 */
export function otherModeRemedies(
  context: CheckContext,
  slots: readonly number[],
  instead: JudgedMode | undefined,
): Remedy[] {
  if (slots.length === 0) return [];
  return usableModes(context)
    .filter((mode) => mode.key !== instead?.key)
    .sort(byLikeness(instead?.timing))
    .slice(0, MAX_OTHER_MODES)
    .map((mode) => ({
      kind: "set",
      label: `Use ${modeText(mode.key, mode.timing)}`,
      patch: slots.map((slot) => ({ path: slotPath(slot, "mode"), value: mode.key })),
    }));
}

/** One value set by one click. */
export function setValue(label: string, path: string, value: string | number | boolean): Remedy {
  return { kind: "set", label, patch: [{ path, value }] };
}
