import type { DeviceLimits } from "@/lib/profile/limits";
import { PROFILE_FORMAT, PROFILE_VERSION } from "@/lib/profile/document";
import { modeName } from "@/lib/timing/mode-name";
import type { RasterTiming } from "@/lib/timing/raster";
import type { BenchTarget } from "@/components/bench/store/types";

/** The key of the mode inside the document alone: on the device it finds its place as the mode of a profile does. */
const KEY = "new";

/**
 * A raster to try in one slot: a document of this mode and this slot, planned as a profile is.
 *
 * Its name goes along where the device holds names of modes.
 */
export function modeTarget(timing: RasterTiming, slot: number, limits: DeviceLimits): BenchTarget {
  const name = limits.texts["modes[*].name"] === undefined ? {} : { name: modeName(timing) };
  return {
    kind: "profile",
    title: `${modeName(timing)} in slot ${slot}`,
    revisionId: null,
    revisionNumber: null,
    document: {
      format: PROFILE_FORMAT,
      version: PROFILE_VERSION,
      title: modeName(timing),
      modes: [{ key: KEY, timing, ...name }],
      slots: [{ number: slot, mode: KEY }],
    },
    patches: [],
    isAltered: false,
    forSlot: slot,
  };
}
