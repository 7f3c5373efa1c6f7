import { fail, ok, type Result } from "@/lib/result";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { AxisTiming, RasterTiming } from "@/lib/timing/raster";
import { isRasterAllowed } from "./check/allowed-raster";

/** A step of the `mode` reach: it moves or widens the picture of every slot with that mode. */
export type PorchMove = {
  readonly rightPx?: number | undefined;
  readonly downLines?: number | undefined;
  /** Even: half is taken from either porch. */
  readonly widerPx?: number | undefined;
  readonly tallerLines?: number | undefined;
};

/** `used-up`: a porch would be below 0. `odd-step`: wider and taller go in even steps. `nothing-active`: no picture is left. */
export type PorchProblem = {
  readonly code: "used-up" | "odd-step" | "nothing-active";
  readonly axis: "horizontal" | "vertical";
};

function moveAxis(
  name: "horizontal" | "vertical",
  axis: AxisTiming,
  by: number,
  larger: number,
): Result<AxisTiming, PorchProblem> {
  if (larger % 2 !== 0) return fail({ code: "odd-step", axis: name });
  const moved = {
    ...axis,
    active: axis.active + larger,
    frontPorch: axis.frontPorch - by - larger / 2,
    backPorch: axis.backPorch + by - larger / 2,
  };
  if (moved.frontPorch < 0 || moved.backPorch < 0) return fail({ code: "used-up", axis: name });
  if (moved.active < 1) return fail({ code: "nothing-active", axis: name });
  return ok(moved);
}

/**
 * Moves a mode's picture by its porches: one px right takes 1 from the front porch and gives it to the back porch;
 * down likewise; wider takes from both and adds to active. Totals, sync and therefore all rates stay.
 */
export function movePorches(timing: RasterTiming, move: PorchMove): Result<RasterTiming, PorchProblem> {
  const horizontal = moveAxis("horizontal", timing.horizontal, move.rightPx ?? 0, move.widerPx ?? 0);
  if (!horizontal.ok) return horizontal;
  const vertical = moveAxis("vertical", timing.vertical, move.downLines ?? 0, move.tallerLines ?? 0);
  if (!vertical.ok) return vertical;
  return ok({ ...timing, horizontal: horizontal.value, vertical: vertical.value });
}

/**
 * How far one kind of porch move can go on a screen, from `timing`, which is at 0. Ends included; wider and taller are even.
 *
 * @returns null where the raster as it is is not allowed. Bound: the porches' own lengths.
 */
export function porchStretch(
  timing: RasterTiming,
  kind: keyof PorchMove,
  screen: ScreenEnvelope | undefined,
): readonly [number, number] | null {
  const step = kind === "widerPx" || kind === "tallerLines" ? 2 : 1;
  const allowed = (by: number) => {
    const moved = movePorches(timing, { [kind]: by });
    return moved.ok && isRasterAllowed(moved.value, screen);
  };
  if (!allowed(0)) return null;
  // Every limit is an end of one stretch, since totals stay: it is left once.
  const reach = (direction: 1 | -1) => {
    let by = 0;
    while (allowed(by + direction * step)) by += direction * step;
    return by;
  };
  return [reach(-1), reach(1)];
}
