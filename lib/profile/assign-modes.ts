import { sameRaster } from "@/lib/timing/same-raster";
import type { RasterTiming } from "@/lib/timing/raster";
import type { ProfileDocument, ProfileMode } from "./document";
import type { DeviceLimits } from "./limits";
import { roundTiming } from "./round";

/** Where a profile's mode lies on the device. */
export type ModePlace = {
  readonly key: string;
  /** `equal`: the device has this timing already. `own`: only its slots use it. `free`: nobody does. */
  readonly how: "equal" | "own" | "free";
};

export type ModeAssignment = {
  readonly places: ReadonlyMap<string, ModePlace>;
  /** Modes of the profile for which the device has no room. */
  readonly noRoom: readonly ProfileMode[];
};

export type AssignInput = {
  readonly base: ProfileDocument;
  readonly modes: readonly ProfileMode[];
  /** The profile's mode key of each slot that it points to a mode; left-out slots are not in it. */
  readonly pointed: ReadonlyMap<number, string>;
  readonly device: DeviceLimits;
};

type TimedMode = ProfileMode & { readonly timing: RasterTiming };

function isTimed(mode: ProfileMode): mode is TimedMode {
  return mode.timing !== undefined;
}

/** Keys of all of a device's modes, in the device's order. */
function deviceKeys(device: DeviceLimits): string[] {
  return Array.from({ length: device.modeCapacity }, (_, index) => String(device.firstMode + index));
}

/** The state of the search: what the device holds, who uses what, and what was given away. */
class Assigner {
  readonly places = new Map<string, ModePlace>();
  private readonly taken = new Set<string>();
  private readonly keys: readonly string[];
  private readonly timings: ReadonlyMap<string, RasterTiming>;

  constructor(private readonly input: AssignInput) {
    this.keys = deviceKeys(input.device);
    const timed = (input.base.modes ?? []).filter(isTimed);
    this.timings = new Map(timed.map((mode) => [mode.key, roundTiming(mode.timing, input.device)]));
  }

  /** Modes of the device that the slots of a profile's mode use now. */
  private usedNowBy(profileKey: string): ReadonlySet<string> {
    const slots = this.input.base.slots ?? [];
    const own = slots.filter((slot) => this.input.pointed.get(slot.number) === profileKey);
    return new Set(own.flatMap((slot) => slot.mode ?? []));
  }

  /** Modes that slots stay on, since the profile points them nowhere. */
  private staysInUse(key: string): boolean {
    return (this.input.base.slots ?? []).some((slot) => slot.mode === key && !this.input.pointed.has(slot.number));
  }

  private usedBefore(key: string): boolean {
    return (this.input.base.slots ?? []).some((slot) => slot.mode === key);
  }

  private give(profileKey: string, key: string | undefined, how: ModePlace["how"]): boolean {
    if (key === undefined) return false;
    this.places.set(profileKey, { key, how });
    this.taken.add(key);
    return true;
  }

  placeEqual(mode: TimedMode): boolean {
    const timing = roundTiming(mode.timing, this.input.device);
    const equal = this.keys.filter((key) => {
      const held = this.timings.get(key);
      return held !== undefined && sameRaster(held, timing);
    });
    const own = this.usedNowBy(mode.key);
    return this.give(mode.key, equal.find((key) => own.has(key)) ?? equal[0], "equal");
  }

  placeElsewhere(mode: TimedMode): boolean {
    const own = this.usedNowBy(mode.key);
    const mine = this.keys.find((key) => own.has(key) && !this.staysInUse(key) && !this.taken.has(key));
    if (this.give(mode.key, mine, "own")) return true;
    const free = this.keys.find((key) => !this.usedBefore(key) && !this.taken.has(key));
    return this.give(mode.key, free, "free");
  }
}

/**
 * Finds a place on the device for each mode of a profile, in the profile's order.
 *
 * First those whose rounded timing the device has already (of several the one that its slots use, else the lowest);
 * then the lowest mode that its slots use, no other slot will use and no other profile mode got; then the lowest that
 * is empty, or used neither before nor after. A mode without a timing has no place of its own.
 */
export function assignModes(input: AssignInput): ModeAssignment {
  const assigner = new Assigner(input);
  const timed = input.modes.filter(isTimed);
  const rest = timed.filter((mode) => !assigner.placeEqual(mode));
  const noRoom = rest.filter((mode) => !assigner.placeElsewhere(mode));
  return { places: assigner.places, noRoom };
}
