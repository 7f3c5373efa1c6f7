import { closestRasters } from "@/lib/timing/fit/closest-rasters";
import { brokenDeviceLimits } from "@/lib/timing/fit/within-device";
import { modeName } from "@/lib/timing/mode-name";
import type { DeviceTimingLimits, RasterTiming } from "@/lib/timing/raster";
import { activeFrameLines, fieldRateHz, lineRateHz } from "@/lib/timing/rates";
import { sameRaster } from "@/lib/timing/same-raster";
import { followInput } from "@/lib/timing/slip/rate-slip";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { DocumentPatch, Remedy } from "@/lib/profile/finding";
import { fitLimits } from "@/lib/profile/fit-limits";
import { outsideRaster } from "@/lib/profile/fit-placement";
import { modePath } from "@/lib/profile/paths";
import { roundTiming } from "@/lib/profile/round";
import { fieldRateText, lineRateText } from "@/lib/profile/words";
import { isRasterAllowed } from "./allowed-raster";
import type { CheckContext, JudgedMode, JudgedSlot } from "./context";
import { placementAxes } from "./placement";

/** Modes of one check that a raster is searched for, first come first: a search costs a few ms, a check is made at each key. */
const MAX_SEARCHED_MODES = 4;

/** Rasters of one search that are held against the slots, nearest first. */
const MAX_CANDIDATES = 6;

/** The nearest raster that fits: as words for a finding's detail, and as a remedy where the mode is free to change. */
export type NearestWay = { readonly words: string; readonly remedies: readonly Remedy[] };

const noWay: NearestWay = { words: "", remedies: [] };

/** The rate that comes out: the source's where the device follows it, else the raster's own. */
function wishedRateHz({ device }: CheckContext, timing: RasterTiming, users: readonly JudgedSlot[]): number {
  const source = device?.outputClock === "input" ? users.find((slot) => slot.source !== undefined)?.source : undefined;
  return source?.fieldRateHz ?? fieldRateHz(timing);
}

/** A placement that lay inside the old raster still does: a mode that is mended should not stop its slots. */
function keepsPlacement({ slot }: JudgedSlot, before: RasterTiming, after: RasterTiming): boolean {
  const { placement } = slot;
  if (placement === undefined) return true;
  const outside = (timing: RasterTiming) =>
    placementAxes(timing, placement).map(({ active, sizePct, offset }) => {
      const cut = outsideRaster(active, sizePct ?? 100, offset ?? 0);
      return cut.before + cut.after;
    });
  const old = outside(before);
  return outside(after).every((lines, index) => lines <= (old[index] ?? 0));
}

/** Whether a raster passes every rule that can stop it, with all slots that show it. */
function isSound(
  { device, screen }: CheckContext,
  limits: DeviceTimingLimits | undefined,
  before: RasterTiming,
  after: RasterTiming,
  users: readonly JudgedSlot[],
): boolean {
  if (!isRasterAllowed(after, screen)) return false;
  if (!users.every((user) => keepsPlacement(user, before, after))) return false;
  if (device === undefined || limits === undefined) return true;
  if (!sameRaster(roundTiming(after, device), after) || brokenDeviceLimits(after, limits).length > 0) return false;
  if (device.outputClock === "free") return true;
  return users.every(({ source }) => !source || isRasterAllowed(followInput(after, source.fieldRateHz), screen));
}

/** The mode keeps its polarities: no screen is known by them, and not every device has both. */
function withPolarities({ horizontal, vertical, ...rest }: RasterTiming, of: RasterTiming): RasterTiming {
  return {
    ...rest,
    horizontal: { ...horizontal, polarity: of.horizontal.polarity },
    vertical: { ...vertical, polarity: of.vertical.polarity },
  };
}

function timingPatch(key: string, before: RasterTiming, after: RasterTiming): DocumentPatch[] {
  const at = (field: string, value: number | boolean | null) => ({ path: modePath(key, `timing.${field}`), value });
  const axis = (name: "horizontal" | "vertical") =>
    (["active", "frontPorch", "sync", "backPorch"] as const).map((part) => at(`${name}.${part}`, after[name][part]));
  const equal = before.equalFields === undefined && after.equalFields === undefined;
  return [
    at("pixelClockHz", after.pixelClockHz),
    at("interlaced", after.interlaced),
    ...(equal ? [] : [at("equalFields", after.equalFields ?? null)]),
    ...axis("horizontal"),
    ...axis("vertical"),
  ];
}

/** The modes of a check that are searched for: the first of those that do not fit and that a changed slot shows. */
function searchedModes({ modes }: CheckContext, screen: ScreenEnvelope): ReadonlySet<string> {
  const broken = modes.filter(
    ({ timing, changedUsers }) => timing && changedUsers.length > 0 && !isRasterAllowed(timing, screen),
  );
  return new Set(broken.slice(0, MAX_SEARCHED_MODES).map(({ key }) => key));
}

function search(context: CheckContext, mode: JudgedMode): NearestWay {
  const { screen, device } = context;
  const { key, timing, changedUsers, users } = mode;
  if (!timing || !screen) return noWay;
  const slots = context.slots.filter(({ slot }) => slot.mode === key);
  const wish = {
    activeLines: activeFrameLines(timing),
    activePx: timing.horizontal.active,
    fieldRateHz: wishedRateHz(context, timing, slots),
    interlaced: timing.interlaced,
  };
  // The mode is stored on the device's steps, also where the clock that comes out is the source's.
  const limits = device && { ...fitLimits(device), outputClock: "free" as const };
  const nearest = closestRasters({ wish, screen, device: limits })
    .slice(0, MAX_CANDIDATES)
    .map((raster) => withPolarities(raster, timing))
    .find((raster) => isSound(context, limits, timing, raster, slots));
  if (nearest === undefined) return noWay;
  const rates = `${lineRateText(lineRateHz(nearest))}, ${fieldRateText(fieldRateHz(nearest))}`;
  const remedy: Remedy = {
    kind: "set",
    label: `Make mode ${key} ${modeName(nearest)} at ${lineRateText(lineRateHz(nearest))}`,
    patch: timingPatch(key, timing, nearest),
  };
  return {
    words: ` Nearest raster that fits: ${modeName(nearest)} (${rates}).`,
    // What a slot that stays shows is not written, so a mode that one shares cannot be changed by a click.
    remedies: changedUsers.length === users.length ? [remedy] : [],
  };
}

type Known = { readonly searched: ReadonlySet<string>; readonly ways: Map<string, NearestWay> };

/** What one check knows already: several findings of a mode ask for the same raster. */
const known = new WeakMap<CheckContext, Known>();

function knownOf(context: CheckContext, screen: ScreenEnvelope): Known {
  const before = known.get(context);
  if (before !== undefined) return before;
  const fresh = { searched: searchedModes(context, screen), ways: new Map<string, NearestWay>() };
  known.set(context, fresh);
  return fresh;
}

/**
 * The raster nearest to a mode that the screen, the device and the slots that show it all take. Searched once a check
 * and mode, for at most 4 modes that do not fit; empty where nothing is near, or where no slot that changes shows it.
 */
export function nearestWay(context: CheckContext, mode: JudgedMode): NearestWay {
  if (context.screen === undefined) return noWay;
  const { searched, ways } = knownOf(context, context.screen);
  if (!searched.has(mode.key)) return noWay;
  const way = ways.get(mode.key) ?? search(context, mode);
  ways.set(mode.key, way);
  return way;
}
