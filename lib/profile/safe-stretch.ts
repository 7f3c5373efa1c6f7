import { trimSource } from "@/lib/picture/effective-picture";
import { rasterProblems } from "@/lib/timing/raster-problems";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { RasterTiming } from "@/lib/timing/raster";
import { placementAxes } from "./check/placement";
import type { Placement, ProfileDocument } from "./document";
import { MAX_STEPS, nearestOffsetInside, outsideRaster } from "./fit-placement";
import type { DeviceLimits, NumberLimit } from "./limits";
import { findMode, findSlot, getValue, parsePath, patternOf, type DocumentPath } from "./paths";
import { nearestStep, numberLimit, roundTiming, stepCount, valueOfStep } from "./round";
import {
  bandEnds,
  bandTests,
  deviceMakes,
  timingField,
  timingLimit,
  withTimingField,
  type TimingField,
} from "./safe-timing";

export type SafeStretchInput = {
  readonly document: ProfileDocument;
  readonly device: DeviceLimits;
  readonly screen?: ScreenEnvelope | undefined;
};

/** A stretch of steps, ends included. */
type Steps = readonly [low: number, high: number];

/** What makes a value safe, and values near which safe ones lie. Those that pass form one stretch. */
type Test = { readonly passes: (value: number) => boolean; readonly seeds: readonly number[] };

/** The last step that passes between one that does and `end`, by halving: at most 40 probes. */
function edge(from: number, end: number, passes: (step: number) => boolean): number {
  if (passes(end)) return end;
  let [inside, outside] = [from, end];
  while (Math.abs(outside - inside) > 1) {
    const middle = Math.trunc((inside + outside) / 2);
    if (passes(middle)) inside = middle;
    else outside = middle;
  }
  return inside;
}

function stepsOf(test: Test, limit: NumberLimit): Steps | null {
  const last = Math.min(stepCount(limit), MAX_STEPS);
  const passes = (step: number) => test.passes(valueOfStep(limit, step));
  const seeds = test.seeds.flatMap((value) =>
    [0, -1, 1].map((by) => Math.min(Math.max(nearestStep(value, limit) + by, 0), last)),
  );
  const seed = [...seeds, 0, last].find(passes);
  return seed === undefined ? null : [edge(seed, 0, passes), edge(seed, last, passes)];
}

/** Stretches that touch are one. */
function merged(stretches: readonly Steps[]): Steps[] {
  const sorted = [...stretches].sort((a, b) => a[0] - b[0]);
  return sorted.reduce<Steps[]>((kept, next) => {
    const before = kept.at(-1);
    if (!before || next[0] > before[1] + 1) return [...kept, next];
    return [...kept.slice(0, -1), [before[0], Math.max(before[1], next[1])]];
  }, []);
}

function gap([low, high]: Steps, step: number): number {
  return Math.max(low - step, step - high, 0);
}

/** The stretch that holds the planned value, else the one nearest to it. */
function chosen(stretches: readonly Steps[], planned: number): Steps | null {
  return merged(stretches).reduce<Steps | null>(
    (best, next) => (best && gap(best, planned) <= gap(next, planned) ? best : next),
    null,
  );
}

function placementTest(placement: Placement, field: string, timing: RasterTiming): Test | null {
  const axis = placementAxes(timing, placement).find(
    ({ sizeField, offsetField }) => sizeField === field || offsetField === field,
  );
  if (!axis) return null;
  const { active, sizePct = 100, offset = 0 } = axis;
  const isSize = axis.sizeField === field;
  const passes = (value: number) => {
    const { before, after, size } = isSize
      ? outsideRaster(active, value, offset)
      : outsideRaster(active, sizePct, value);
    return before + after === 0 && size > 0;
  };
  const seed = isSize ? 100 : (nearestOffsetInside(active, sizePct, offset, { from: 0, to: active }) ?? 0);
  return { passes, seeds: [seed] };
}

/** Pictures of a mode's slots have to stay inside when its active part changes, as far as they are inside now. */
function keepsPictures(document: ProfileDocument, key: string, timing: RasterTiming): (after: RasterTiming) => boolean {
  const placements = (document.slots ?? []).flatMap((slot) =>
    slot.mode === key && slot.placement ? [slot.placement] : [],
  );
  const isWhole = (in_: RasterTiming, placement: Placement) =>
    placementAxes(in_, placement).every(({ active, sizePct = 100, offset = 0 }) => {
      const { before, after } = outsideRaster(active, sizePct, offset);
      return before + after === 0;
    });
  const inside = placements.filter((placement) => isWhole(timing, placement));
  return (after) => inside.every((placement) => isWhole(after, placement));
}

function timingTests(input: SafeStretchInput, key: string, timing: RasterTiming, field: TimingField): Test[] {
  const { device, document, screen } = input;
  const keeps = field.axis !== "clock" && field.part === "active" ? keepsPictures(document, key, timing) : () => true;
  const now = field.axis === "clock" ? timing.pixelClockHz : timing[field.axis][field.part];
  return bandTests(screen).map(({ band, allows }) => ({
    passes: (value) => {
      const after = withTimingField(timing, field, value);
      return allows(after) && deviceMakes(after, device) && keeps(after);
    },
    seeds: [now, ...(band ? bandEnds(timing, field, band) : [])],
  }));
}

function trimTest({ document }: SafeStretchInput, field: string): Test {
  const sources = (document.slots ?? []).flatMap((slot) => slot.expects ?? []);
  const trim = document.everywhere?.trim ?? {};
  return {
    passes: (value) => sources.every((source) => trimSource(source, { ...trim, [field]: value }) !== null),
    seeds: [0],
  };
}

function testsFor(path: DocumentPath, input: SafeStretchInput): Test[] {
  const always: Test = { passes: () => true, seeds: [] };
  const [group = "", field = ""] = path.fields;
  if (path.scope === "document")
    return [group === "everywhere" && field === "trim" ? trimTest(input, path.fields[2] ?? "") : always];
  const key = path.scope === "slot" ? findSlot(input.document, path.number)?.mode : path.key;
  const mode = key === undefined ? undefined : findMode(input.document, key)?.timing;
  const timing = mode && roundTiming(mode, input.device);
  if (path.scope === "slot") {
    const placement =
      group === "placement" && timing && rasterProblems(timing).length === 0
        ? findSlot(input.document, path.number)?.placement
        : undefined;
    const test = placement && timing ? placementTest(placement, field, timing) : null;
    return [test ?? always];
  }
  const number = timingField(path.fields.slice(1));
  return timing && number && group === "timing" ? timingTests(input, path.key, timing, number) : [always];
}

/**
 * The stretch of a number's device range that is safe now, every other value being as the document has it: inside the
 * mode's raster for a placement, allowed on the screen for a timing, something left of the picture for trim.
 *
 * @returns the ends, on the device's steps; of several stretches the one that holds the value, or lies nearest to it.
 * Null where the device has no such number or no value of it is safe. Bound: about 60 probes a band and end.
 */
export function safeStretch(path: string, input: SafeStretchInput): readonly [number, number] | null {
  const parsed = parsePath(path);
  const range = numberLimit(input.device, patternOf(path) ?? "");
  if (!parsed || !range) return null;
  const number = parsed.scope === "mode" ? timingField(parsed.fields.slice(1)) : null;
  const limit = number ? timingLimit(range, number, input.device) : range;
  const stretches = testsFor(parsed, input).flatMap((test) => {
    const steps = stepsOf(test, limit);
    return steps ? [steps] : [];
  });
  const value = getValue(input.document, path);
  const best = chosen(stretches, typeof value === "number" ? nearestStep(value, limit) : 0);
  return best && [valueOfStep(limit, best[0]), valueOfStep(limit, best[1])];
}
