import { NEAREST_TRIES, type Budget } from "@/lib/timing/fit/budget";
import { catalogue } from "@/lib/timing/catalogue/catalogue";
import type { CatalogueEntry } from "@/lib/timing/catalogue/catalogue-entry";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { fittedRaster } from "@/lib/timing/fit/fitted-raster";
import type {
  FigureChange,
  FitConstraint,
  FitFigure,
  FitRequest,
  FitWish,
  NearestRaster,
} from "@/lib/timing/fit/fit-types";
import { nearbyLines, nearbyWidths } from "@/lib/timing/fit/nearby-wishes";
import { search, type Found } from "@/lib/timing/fit/search";
import { FIELD_RATE_TOLERANCE, searchSpace } from "@/lib/timing/fit/search-space";
import { brokenDeviceLimits } from "@/lib/timing/fit/within-device";
import { fitsEnvelope } from "@/lib/timing/judge-envelope";
import type { RasterTiming } from "@/lib/timing/raster";
import { activeFrameLines, fieldLines, fieldRateHz, lineRateHz, lineTotal } from "@/lib/timing/rates";
import { sameRaster } from "@/lib/timing/same-raster";
import { standardNames, standardRaster } from "@/lib/timing/standards";

/** Published rasters offered at most, beside those that were searched for. */
const MAX_STANDARDS = 3;

/** How much a change of one figure weighs against a like change of the others; a change of scan counts as a tenth. */
const weights: Partial<Record<FitFigure, number>> = { activeLines: 1, fieldRateHz: 1, activePx: 0.25 };
const SCAN_WEIGHT = 0.1;
const OTHER_WEIGHT = 0.5;

const units: Readonly<Record<FitFigure, FigureChange["unit"]>> = {
  activeLines: "lines",
  activePx: "px",
  fieldRateHz: "Hz",
  interlaced: "",
  lineRateHz: "Hz",
  pixelClockHz: "Hz",
  lineTotal: "clocks",
  fieldLines: "lines",
};

function figuresOf(timing: RasterTiming): Readonly<Record<FitFigure, number | boolean>> {
  return {
    activeLines: activeFrameLines(timing),
    activePx: timing.horizontal.active,
    fieldRateHz: fieldRateHz(timing),
    interlaced: timing.interlaced,
    lineRateHz: lineRateHz(timing),
    pixelClockHz: timing.pixelClockHz,
    lineTotal: lineTotal(timing),
    fieldLines: fieldLines(timing),
  };
}

/** Rates count as kept within the tolerance that a fit has. */
const tolerances: Partial<Record<FitFigure, number>> = { fieldRateHz: FIELD_RATE_TOLERANCE, lineRateHz: 1e-4 };

/** What a raster gives up of a wish. */
export function changesOf(wish: FitWish, timing: RasterTiming, keep: readonly FitFigure[] = []): FigureChange[] {
  const figures = figuresOf(timing);
  return (Object.keys(units) as FitFigure[]).flatMap((figure) => {
    const [from, to] = [wish[figure], figures[figure]];
    if (from === undefined || from === to) return [];
    const near =
      typeof from === "number" && typeof to === "number" && Math.abs(to / from - 1) <= (tolerances[figure] ?? 0);
    return near ? [] : [{ figure, from, to, unit: units[figure], kept: keep.includes(figure) }];
  });
}

function distance(changes: readonly FigureChange[]): number {
  return changes.reduce((sum, { figure, from, to }) => {
    if (typeof from !== "number" || typeof to !== "number") return sum + SCAN_WEIGHT;
    return sum + (weights[figure] ?? OTHER_WEIGHT) * Math.abs(to / from - 1);
  }, 0);
}

/** A request with the tries that its answer may still take. */
type Search = FitRequest & { readonly budget: Budget };

function firstOf(request: Search, wish: FitWish, without: readonly FitConstraint[] = []): Found[] {
  const [best] = search(searchSpace({ ...request, wish }, new Set(without)), request.budget);
  return best === undefined ? [] : [best];
}

/** The nearest wish of a list that fits. */
function firstThatFits(request: Search, wishes: readonly FitWish[]): Found[] {
  for (const wish of wishes) {
    const found = firstOf(request, wish);
    if (found.length > 0) return found;
  }
  return [];
}

/** The lines wished for, as fast as a standard's line rate makes them. */
function atStandardLineRates(request: Search): Found[] {
  const { wish } = request;
  if (wish.lineRateHz !== undefined) return [];
  const rates = new Set(standardNames.map((name) => lineRateHz(standardRaster(name).timing)));
  return [...rates].flatMap((rate) => {
    const space = searchSpace({ ...request, wish: { ...wish, lineRateHz: rate } }, new Set(["wish-field-rate"]), false);
    return search(space, request.budget).slice(0, 1);
  });
}

function otherScan(request: Search): Found[] {
  const { wish } = request;
  if (!wish.interlaced && wish.activeLines % 2 !== 0) return [];
  return firstOf(request, { ...wish, interlaced: !wish.interlaced });
}

/** The wish without one of the figures that it need not state. */
function withoutOne(request: Search): Found[] {
  const optional = ["lineRateHz", "pixelClockHz", "lineTotal", "fieldLines"] as const;
  const stated = optional.filter((figure) => request.wish[figure] !== undefined);
  return stated.flatMap((figure) => firstOf(request, { ...request.wish, [figure]: undefined }));
}

const takenByScreen = new WeakMap<ScreenEnvelope, readonly CatalogueEntry[]>();

/** Published rasters that a screen takes: judged once for each envelope, since a check asks for one mode after another. */
function publishedFor(screen: ScreenEnvelope): readonly CatalogueEntry[] {
  const known = takenByScreen.get(screen);
  if (known !== undefined) return known;
  const taken = catalogue.filter(({ timing }) => fitsEnvelope(timing, screen));
  takenByScreen.set(screen, taken);
  return taken;
}

function standards(request: FitRequest): RasterTiming[] {
  const { wish, screen, device = {} } = request;
  const usable = publishedFor(screen).filter(({ timing }) => brokenDeviceLimits(timing, device).length === 0);
  const ranked = usable
    .map(({ timing }) => ({ timing, far: distance(changesOf(wish, timing)) }))
    .sort((a, b) => a.far - b.far)
    .map(({ timing }) => timing);
  return distinct(ranked).slice(0, MAX_STANDARDS);
}

function distinct(timings: readonly RasterTiming[]): RasterTiming[] {
  return timings.filter((timing, index) => timings.findIndex((other) => sameRaster(other, timing)) === index);
}

/** Those that give up least of a wish first; of what the owner wants kept before all. */
function byLeastGivenUp(wish: FitWish, keep: readonly FitFigure[], timings: readonly RasterTiming[]) {
  return distinct(timings)
    .map((timing) => ({ timing, changed: changesOf(wish, timing, keep) }))
    .map((one) => ({
      ...one,
      broken: one.changed.filter(({ kept }) => kept).length,
      far: distance(one.changed),
    }))
    .sort((a, b) => a.broken - b.broken || a.far - b.far);
}

/**
 * Rasters that do fit when the wish does not, with what each gives up: those that keep what the owner wants kept
 * first, then by how little they change.
 *
 * Tried are more or fewer lines, another field rate (the nearest, and those of the standards' line rates), the other
 * scan, another width, the wish without a figure that it need not state, and the standards themselves.
 */
export function nearestRasters(wished: FitRequest, limit: number): NearestRaster[] {
  const request: Search = { ...wished, budget: { left: NEAREST_TRIES } };
  const { wish, keep = [], screen } = request;
  const found = [
    ...firstThatFits(request, nearbyLines(request, "fewer")),
    ...firstThatFits(request, nearbyLines(request, "more")),
    ...firstOf(request, wish, ["wish-field-rate"]),
    ...atStandardLineRates(request),
    ...otherScan(request),
    ...firstThatFits(request, nearbyWidths(request)),
    ...withoutOne(request),
  ];
  const costs = new Map(found.map(({ timing, porchCost }) => [timing, porchCost]));
  const all = [...found.map(({ timing }) => timing), ...standards(request)];
  return byLeastGivenUp(wish, keep, all)
    .slice(0, limit)
    .map(({ timing, changed }) => ({
      ...fittedRaster(timing, wish.fieldRateHz, screen, costs.get(timing) ?? 0),
      changed,
    }));
}

/**
 * Rasters that fit and come close to a wish, best first: those that meet it, else other counts of lines, another rate
 * or the other scan, else published ones and other widths.
 *
 * What a check can spare for a mode at each key: `budget` is spent, not more.
 * @param request without `requestProblems`
 */
export function closeRasters(wished: FitRequest, budget: Budget): RasterTiming[] {
  const request: Search = { ...wished, budget };
  const { wish, keep = [] } = request;
  const met = search(searchSpace(request), budget);
  if (met.length > 0) return met.map(({ timing }) => timing);
  const found = [
    ...otherScan(request),
    ...firstThatFits(request, nearbyLines(request, "fewer")),
    ...firstThatFits(request, nearbyLines(request, "more")),
    ...firstOf(request, wish, ["wish-field-rate"]),
  ].map(({ timing }) => timing);
  const wide = firstThatFits(request, found.length > 0 ? [] : nearbyWidths(request)).map(({ timing }) => timing);
  const any = found.length > 0 ? found : [...wide, ...standards(request)];
  return byLeastGivenUp(wish, keep, any).map(({ timing }) => timing);
}
