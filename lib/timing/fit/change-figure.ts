import { fail, ok, type Result } from "@/lib/result";
import { editableFigures, type BlankPart, type EditFigure } from "@/lib/timing/fit/editable-figures";
import type { AxisTiming, DeviceTimingLimits, RasterTiming } from "@/lib/timing/raster";
import { rasterProblems } from "@/lib/timing/raster-problems";
import { axisBlank, fieldLines, fieldRateHz, frameLines, lineRateHz, lineTotal } from "@/lib/timing/rates";

/** `activeLines` counts lines of a **field** here: one raster is being edited, not wished for. */
export type FigureEdit = {
  readonly timing: RasterTiming;
  readonly figure: EditFigure;
  readonly value: number;
  /** Figures that may not change with it. */
  readonly keep?: readonly EditFigure[] | undefined;
  readonly device?: DeviceTimingLimits | undefined;
};

export type EditedFigure = { readonly figure: EditFigure; readonly from: number; readonly to: number };

export type EditOutcome = {
  readonly timing: RasterTiming;
  /** Everything that changed, the edited figure among it; it may differ from the value asked for by a step of the device. */
  readonly changed: readonly EditedFigure[];
};

/** `locked`: the figures of `by` would have to give way. `impossible`: no raster has it, locks or not. */
export type EditError = {
  readonly code: "locked" | "impossible";
  readonly by: readonly EditFigure[];
  readonly message: string;
};

/** The axis with `by` units more blanking, taken from or given to the porches in proportion, those kept left alone. */
function withBlank(axis: AxisTiming, by: number, kept: { front: boolean; back: boolean }): AxisTiming | undefined {
  const [front, back] = [kept.front ? 0 : axis.frontPorch, kept.back ? 0 : axis.backPorch];
  if (by === 0) return axis;
  if (kept.front && kept.back) return undefined;
  const share = front + back === 0 ? (kept.front ? 0 : kept.back ? 1 : 0.5) : front / (front + back);
  const toFront = kept.back ? by : Math.round(by * share);
  const next = { ...axis, frontPorch: axis.frontPorch + toFront, backPorch: axis.backPorch + by - toFront };
  return next.frontPorch < 0 || next.backPorch < 0 ? undefined : next;
}

function onGrid(clockHz: number, device: DeviceTimingLimits | undefined): number {
  const clock = device?.clockHz;
  if (clock === undefined || device?.outputClock === "input") return Math.round(clockHz);
  const steps = Math.round((Math.min(Math.max(clockHz, clock.min), clock.max) - clock.min) / clock.step);
  return clock.min + Math.min(steps, Math.floor((clock.max - clock.min) / clock.step)) * clock.step;
}

type Kept = (figure: EditFigure) => boolean;
type Attempt = { readonly needs: readonly EditFigure[]; readonly make: () => RasterTiming | undefined };

const axisName = { horizontal: "lineTotal", vertical: "fieldLines" } as const;

function keptPorches(kept: Kept, name: "horizontal" | "vertical") {
  return { front: kept(`${name}.frontPorch`), back: kept(`${name}.backPorch`) };
}

/** A new picture size: the total follows, or the porches take it up. */
function resize(
  { timing, device }: FigureEdit,
  kept: Kept,
  name: "horizontal" | "vertical",
  active: number,
): Attempt[] {
  const axis = timing[name];
  const longer: RasterTiming = { ...timing, [name]: { ...axis, active } };
  const porches: Attempt = {
    needs: [`${name}.frontPorch`, `${name}.backPorch`],
    make: () => {
      const blank = withBlank(axis, axis.active - active, keptPorches(kept, name));
      return blank === undefined ? undefined : { ...timing, [name]: { ...blank, active } };
    },
  };
  return [...keepRates(longer, timing, device, [axisName[name]]), porches];
}

/**
 * A raster with another total: its clock stays and the rates follow; else the clock follows and the line rate, or the
 * field rate, stays.
 */
function keepRates(
  next: RasterTiming,
  before: RasterTiming,
  device: DeviceTimingLimits | undefined,
  also: readonly EditFigure[],
): Attempt[] {
  const lines = frameLines(next) !== frameLines(before);
  const holdField = onGrid((next.pixelClockHz * fieldRateHz(before)) / fieldRateHz(next), device);
  const holdLine = onGrid((next.pixelClockHz * lineRateHz(before)) / lineRateHz(next), device);
  const clocks = lineTotal(next) !== lineTotal(before);
  const rates: EditFigure[] = clocks ? ["lineRateHz", "fieldRateHz"] : lines ? ["fieldRateHz"] : [];
  return [
    ...(clocks
      ? [
          {
            needs: [...also, "pixelClockHz" as const, ...(lines ? ["fieldRateHz" as const] : [])],
            make: () => ({ ...next, pixelClockHz: holdLine }),
          },
        ]
      : []),
    { needs: [...also, ...rates], make: () => next },
    { needs: [...also, "pixelClockHz", "lineRateHz"], make: () => ({ ...next, pixelClockHz: holdField }) },
  ];
}

/** A new total: the porches take up the difference, and the rates follow as in `keepRates`. */
function newTotal(edit: FigureEdit, kept: Kept, name: "horizontal" | "vertical"): Attempt[] {
  const { timing, value, device } = edit;
  const axis = timing[name];
  const blank = withBlank(axis, value - axis.active - axisBlank(axis), keptPorches(kept, name));
  if (blank === undefined) return [];
  return keepRates({ ...timing, [name]: blank }, timing, device, []);
}

/** A new porch or sync: the other porch gives way, so that picture and total stay; else the total follows. */
function newPart(edit: FigureEdit, kept: Kept, name: "horizontal" | "vertical", part: BlankPart): Attempt[] {
  const { timing, value, device } = edit;
  const axis: AxisTiming = { ...timing[name], [part]: value };
  const by = value - timing[name][part];
  const others = (["backPorch", "frontPorch"] as const).filter((other) => other !== part && !kept(`${name}.${other}`));
  const within = others.map((other): Attempt => ({
    needs: [`${name}.${other}`],
    make: () => (axis[other] - by < 0 ? undefined : { ...timing, [name]: { ...axis, [other]: axis[other] - by } }),
  }));
  return [...within, ...keepRates({ ...timing, [name]: axis }, timing, device, [axisName[name]])];
}

/** A new rate: the clock follows; else the line total; for the field rate else the lines of the field. */
function newRate({ timing, figure, value, device }: FigureEdit, kept: Kept): Attempt[] {
  const current = editableFigures(timing)[figure];
  const ratio = value / current;
  const total = (name: "horizontal" | "vertical", count: number): RasterTiming | undefined => {
    const axis = timing[name];
    const blank = withBlank(axis, Math.round(count) - axis.active - axisBlank(axis), keptPorches(kept, name));
    return blank === undefined ? undefined : { ...timing, [name]: blank };
  };
  const other: EditFigure = figure === "lineRateHz" ? "fieldRateHz" : "lineRateHz";
  const lines: Attempt = { needs: ["fieldLines"], make: () => total("vertical", fieldLines(timing) / ratio) };
  return [
    {
      needs: ["pixelClockHz", other],
      make: () => ({ ...timing, pixelClockHz: onGrid(timing.pixelClockHz * ratio, device) }),
    },
    { needs: ["lineTotal", other], make: () => total("horizontal", lineTotal(timing) / ratio) },
    ...(figure === "fieldRateHz" ? [lines] : []),
  ];
}

/** A new clock: the rates follow; else the line total does, and the line rate stays. */
function newClock({ timing, value, device }: FigureEdit, kept: Kept): Attempt[] {
  const pixelClockHz = onGrid(value, device);
  const { horizontal } = timing;
  const by = Math.round((lineTotal(timing) * pixelClockHz) / timing.pixelClockHz) - lineTotal(timing);
  return [
    { needs: ["lineRateHz", "fieldRateHz"], make: () => ({ ...timing, pixelClockHz }) },
    {
      needs: ["lineTotal"],
      make: () => {
        const blank = withBlank(horizontal, by, keptPorches(kept, "horizontal"));
        return blank === undefined ? undefined : { ...timing, pixelClockHz, horizontal: blank };
      },
    },
  ];
}

function attempts(edit: FigureEdit, kept: Kept): Attempt[] {
  const { figure, value } = edit;
  switch (figure) {
    case "activeLines":
      return resize(edit, kept, "vertical", value);
    case "activePx":
      return resize(edit, kept, "horizontal", value);
    case "lineTotal":
      return newTotal(edit, kept, "horizontal");
    case "fieldLines":
      return newTotal(edit, kept, "vertical");
    case "fieldRateHz":
    case "lineRateHz":
      return newRate(edit, kept);
    case "pixelClockHz":
      return newClock(edit, kept);
    default: {
      const [name, part] = figure.split(".") as ["horizontal" | "vertical", BlankPart];
      return newPart(edit, kept, name, part);
    }
  }
}

/** Rates count as kept within half a step of the clock, or of one clock in the line where there is no grid. */
function isKept(
  figure: EditFigure,
  from: number,
  to: number,
  timing: RasterTiming,
  device: DeviceTimingLimits | undefined,
): boolean {
  if (figure !== "fieldRateHz" && figure !== "lineRateHz") return from === to;
  const step = device?.clockHz?.step ?? 1;
  const share = Math.max(step / timing.pixelClockHz, 1 / lineTotal(timing)) / 2;
  return Math.abs(to / from - 1) <= share * (1 + 1e-9);
}

/**
 * Changes one figure of a raster, and as little else as the locks leave: the first way that touches nothing kept.
 *
 * A new size or total: the rates follow, or the clock, or the porches. A new rate: the clock, or the line total, or
 * the field's lines. A new porch: the other porch, or the total. Kept rates hold to within half a step of the clock
 * (or half a clock of the line, where the clock itself is kept).
 * Errors: `locked` with the figures that stand in the way of the first way, `impossible` where no way gives a raster.
 */
export function changeFigure(edit: FigureEdit): Result<EditOutcome, EditError> {
  const { timing, figure, device, keep = [] } = edit;
  const kept: Kept = (name) => name !== figure && keep.includes(name);
  const before = editableFigures(timing);
  const ways = attempts(edit, kept).map(({ needs, make }) => ({ needs, made: make() }));
  const sound = ways.filter((way) => way.made !== undefined && rasterProblems(way.made).length === 0);
  for (const { made } of sound) {
    if (made === undefined) continue;
    const after = editableFigures(made);
    const names = Object.keys(after) as EditFigure[];
    const broken = names.some((name) => kept(name) && !isKept(name, before[name], after[name], made, device));
    if (broken) continue;
    const changed = names.filter((name) => before[name] !== after[name]);
    return ok({
      timing: made,
      changed: changed.map((name) => ({ figure: name, from: before[name], to: after[name] })),
    });
  }
  const by = [...new Set(ways.flatMap(({ needs }) => needs.filter(kept)))];
  const loose = keep.length > 0 ? changeFigure({ ...edit, keep: [] }) : undefined;
  if (by.length > 0 && loose?.ok === true)
    return fail({ code: "locked", by, message: "What is kept leaves no room for this." });
  return fail({ code: "impossible", by: [], message: "No raster has this figure." });
}
