import type { PathMessage } from "@/lib/result";
import type { ScreenEnvelope, Span } from "@/lib/timing/envelope";

/** More bands than any screen states; bounds every search over them. */
export const MAX_BANDS = 16;

/** Beyond any screen, and safe to multiply. */
const MAX_RATE_HZ = 1e7;
const MAX_OTHER = 1e11;

function spanProblems(path: string, span: Span, max: number): PathMessage[] {
  const [low, high] = span;
  if (![low, high].every((end) => Number.isFinite(end) && end > 0 && end <= max)) {
    return [{ path, message: `Both ends must be numbers above 0, and ${max} at most.` }];
  }
  if (low > high) return [{ path, message: "The lower end is above the upper one." }];
  return [];
}

/**
 * What keeps a screen's envelope from being checked against: crossed or endless spans, too many bands, limits below 0.
 *
 * Empty for every envelope that the other functions of `lib/timing` take; no band at all is no problem but unknown.
 */
export function envelopeProblems(screen: ScreenEnvelope): PathMessage[] {
  if (screen.bands.length > MAX_BANDS) {
    return [{ path: "bands", message: `At most ${MAX_BANDS} bands can be checked.` }];
  }
  const bands = screen.bands.flatMap((band, index) => [
    ...spanProblems(`bands[${index}].lineRateHz`, band.lineRateHz, MAX_RATE_HZ),
    ...spanProblems(`bands[${index}].fieldRateHz`, band.fieldRateHz, MAX_RATE_HZ),
  ]);
  const single = (["maxPixelClockHz", "loadOhm", "minSyncUs", "minBackPorchUs", "minFieldBlankUs"] as const).flatMap(
    (path) => {
      const value = screen[path];
      if (value === undefined || (Number.isFinite(value) && value > 0 && value <= MAX_OTHER)) return [];
      return [{ path, message: "Must be a number above 0." }];
    },
  );
  const level = screen.syncVpp === undefined ? [] : spanProblems("syncVpp", screen.syncVpp, MAX_OTHER);
  return [...bands, ...single, ...level];
}
