import type { EnvelopeBand } from "@/lib/timing/envelope";
import type { FitConstraint, FitRequest } from "@/lib/timing/fit/fit-types";
import type { DevicePartSpans } from "@/lib/timing/raster";

/** A wish is met where the field rate is within this share of it: the tolerance of a CTA-861 format's clock. */
export const FIELD_RATE_TOLERANCE = 0.005;

/** Without a device that says otherwise: fine enough for a modeline, coarse enough to be read. */
const DEFAULT_CLOCK_STEP_HZ = 1000;

/** A source's clock is not ours to step: 1 Hz stands for no step at all. */
const FREE_CLOCK_STEP_HZ = 1;

/** The largest line and field totals that are searched, whatever is asked. Above any published raster. */
export const MAX_LINE_TOTAL = 16_384;
export const MAX_FIELD_LINES = 8_192;

/** Everything a search may choose from, as plain numbers: no limit is `Infinity` or 0. */
export type SearchSpace = {
  readonly activePx: number;
  readonly activeFieldLines: number;
  readonly interlaced: boolean;
  readonly fieldRateHz: number;
  readonly fieldRateTolerance: number;
  readonly bands: readonly EnvelopeBand[];
  readonly clock: {
    readonly minHz: number;
    readonly maxHz: number;
    readonly stepHz: number;
    readonly anchorHz: number;
  };
  readonly multiple: number;
  readonly maxLineTotal: number;
  readonly maxFieldLines: number;
  readonly minSyncUs: number;
  readonly minBackPorchUs: number;
  readonly minFieldBlankUs: number;
  readonly horizontalParts: DevicePartSpans;
  readonly verticalParts: DevicePartSpans;
  /** What holds the blanking of each axis to the standards' spans. */
  readonly standardAcross: StandardHold;
  readonly standardDown: StandardHold;
  readonly lineRateHz?: number | undefined;
  readonly pixelClockHz?: number | undefined;
  readonly lineTotal?: number | undefined;
  readonly fieldLines?: number | undefined;
  /** The scan itself is not to be had. */
  readonly barred: boolean;
};

/** All parts of blanking are held to the standards, or the sync alone. */
export type StandardHold = "all" | "sync";

const anything = [0, Infinity] as const;

function bandsOf(request: FitRequest, without: ReadonlySet<FitConstraint>): readonly EnvelopeBand[] {
  const { bands } = request.screen;
  if (bands.length === 0) return [{ lineRateHz: anything, fieldRateHz: anything }];
  return bands.map((band) => ({
    lineRateHz: without.has("screen-line-rate") ? anything : band.lineRateHz,
    fieldRateHz: without.has("screen-field-rate") ? anything : band.fieldRateHz,
  }));
}

function clockOf(request: FitRequest, without: ReadonlySet<FitConstraint>): SearchSpace["clock"] {
  const device = without.has("device-clock") ? undefined : request.device?.clockHz;
  const screenMax = without.has("screen-clock") ? undefined : request.screen.maxPixelClockHz;
  const free = request.device?.outputClock === "input" || without.has("device-clock-step");
  const stated = request.device?.clockHz;
  return {
    minHz: device?.min ?? 0,
    maxHz: Math.min(device?.max ?? Infinity, screenMax ?? Infinity),
    stepHz: free ? FREE_CLOCK_STEP_HZ : (stated?.step ?? DEFAULT_CLOCK_STEP_HZ),
    anchorHz: free ? 0 : (stated?.min ?? 0),
  };
}

/**
 * The space of a request with some of its constraints taken away.
 *
 * The standards' spans hold for the axis whose totals the owner leaves open: whoever states a line total, a clock, a
 * count of field lines or a line rate gets the porches that follow from it, and the notes say where those are outside.
 * @param follow false: hold all blanking to the standards, whatever is stated
 */
export function searchSpace(
  request: FitRequest,
  without: ReadonlySet<FitConstraint> = new Set(),
  follow = true,
): SearchSpace {
  const { wish, screen, device } = request;
  const kept = <T>(constraint: FitConstraint, value: T | undefined): T | undefined =>
    without.has(constraint) ? undefined : value;
  const lineTotal = kept("wish-line-total", wish.lineTotal);
  const fieldLines = kept("wish-field-lines", wish.fieldLines);
  const pixelClockHz = kept("wish-clock", wish.pixelClockHz);
  const lineRateHz = kept("wish-line-rate", wish.lineRateHz);
  const followsAcross = follow && (lineTotal !== undefined || pixelClockHz !== undefined);
  const followsDown = follow && (fieldLines !== undefined || lineRateHz !== undefined);
  const screenBars = wish.interlaced && kept("screen-interlace", screen.interlace) === false;
  const deviceBars = wish.interlaced && kept("device-interlace", device?.interlace) === false;
  const parts = without.has("device-parts") ? undefined : device;
  return {
    activePx: wish.activePx,
    activeFieldLines: wish.interlaced ? wish.activeLines / 2 : wish.activeLines,
    interlaced: wish.interlaced,
    fieldRateHz: wish.fieldRateHz,
    fieldRateTolerance: without.has("wish-field-rate") ? Infinity : FIELD_RATE_TOLERANCE,
    bands: bandsOf(request, without),
    clock: clockOf(request, without),
    multiple: kept("device-multiple", device?.horizontalMultiple) ?? 1,
    maxLineTotal: Math.min(kept("device-line-total", device?.maxLineTotal) ?? Infinity, MAX_LINE_TOTAL),
    maxFieldLines: Math.min(kept("device-field-lines", device?.maxFieldLines) ?? Infinity, MAX_FIELD_LINES),
    minSyncUs: kept("screen-sync", screen.minSyncUs) ?? 0,
    minBackPorchUs: kept("screen-back-porch", screen.minBackPorchUs) ?? 0,
    minFieldBlankUs: kept("screen-field-blank", screen.minFieldBlankUs) ?? 0,
    horizontalParts: parts?.horizontal ?? {},
    verticalParts: parts?.vertical ?? {},
    standardAcross: without.has("standard-line-blank") || followsAcross ? "sync" : "all",
    standardDown: without.has("standard-field-blank") || followsDown ? "sync" : "all",
    lineRateHz,
    pixelClockHz,
    lineTotal,
    fieldLines,
    barred: screenBars || deviceBars,
  };
}
