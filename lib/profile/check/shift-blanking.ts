import { judgeBlanking } from "@/lib/timing/judge-blanking";
import { rasterProblems } from "@/lib/timing/raster-problems";
import { sameRaster } from "@/lib/timing/same-raster";
import type { RasterTiming } from "@/lib/timing/raster";
import type { Remedy } from "@/lib/profile/finding";
import type { DeviceLimits } from "@/lib/profile/limits";
import { modePath } from "@/lib/profile/paths";
import { isInRange, numberLimit, roundTiming } from "@/lib/profile/round";
import { withUnit } from "@/lib/profile/words";

export type Axis = "horizontal" | "vertical";
export type Part = "active" | "frontPorch" | "sync" | "backPorch";

/** One part grows or shrinks to `count`, another gives or takes what that needs: totals and rates stay. */
export type BlankingShift = { readonly axis: Axis; readonly part: Part; readonly count: number };

const names: Readonly<Record<Part, string>> = {
  active: "picture",
  frontPorch: "front porch",
  sync: "sync",
  backPorch: "back porch",
};

/** Whoever gives comes in this order: blanking before picture. */
const donors: readonly Part[] = ["backPorch", "frontPorch", "active"];

function shifted(timing: RasterTiming, { axis, part, count }: BlankingShift, donor: Part): RasterTiming {
  const old = timing[axis];
  return { ...timing, [axis]: { ...old, [part]: count, [donor]: old[donor] - (count - old[part]) } };
}

function outsideCount(timing: RasterTiming): number {
  return judgeBlanking(timing).filter((verdict) => verdict.outcome !== "inside").length;
}

function deviceHolds(timing: RasterTiming, device: DeviceLimits | undefined): boolean {
  if (!device) return true;
  return (
    sameRaster(roundTiming(timing, device), timing) &&
    (["horizontal", "vertical"] as const).every((axis) =>
      (["active", ...donors, "sync"] as const).every((part) => {
        const limit = numberLimit(device, `modes[*].timing.${axis}.${part}`);
        return limit === undefined || isInRange(timing[axis][part], limit);
      }),
    )
  );
}

/**
 * A remedy for a part of blanking that is too short or too long, its room taken from the first part that can spare it.
 *
 * @param passes whether the finding is gone; a shift that only moves the trouble elsewhere is no remedy
 */
export function shiftRemedy(
  of: { readonly key: string; readonly timing: RasterTiming; readonly device: DeviceLimits | undefined },
  shift: BlankingShift,
  passes: (timing: RasterTiming) => boolean,
): Remedy[] {
  const before = outsideCount(of.timing);
  const donor = donors.find((part) => {
    if (part === shift.part) return false;
    const timing = shifted(of.timing, shift, part);
    return (
      rasterProblems(timing).length === 0 &&
      passes(timing) &&
      outsideCount(timing) <= before &&
      deviceHolds(timing, of.device)
    );
  });
  if (donor === undefined) return [];
  const after = shifted(of.timing, shift, donor);
  const unit = shift.axis === "horizontal" ? "px" : "lines";
  const at = (part: Part) => ({
    path: modePath(of.key, `timing.${shift.axis}.${part}`),
    value: after[shift.axis][part],
  });
  const label = `Use a ${names[shift.part]} of ${withUnit(shift.count, unit)}`;
  return [{ kind: "set", label, patch: [at(shift.part), at(donor)] }];
}
