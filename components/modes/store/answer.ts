import { modeFindings } from "@/lib/profile/mode-findings";
import { fitLimits } from "@/lib/profile/fit-limits";
import type { Finding } from "@/lib/profile/finding";
import type { PathMessage } from "@/lib/result";
import { clockSteps, type ClockSteps } from "@/lib/timing/clock-steps";
import { changesOf } from "@/lib/timing/fit/nearest";
import { fitRaster } from "@/lib/timing/fit/fit-raster";
import { fittedRaster } from "@/lib/timing/fit/fitted-raster";
import type { FigureChange, FitOutcome, FitRequest, FittedRaster } from "@/lib/timing/fit/fit-types";
import type { DeviceTimingLimits, RasterTiming } from "@/lib/timing/raster";
import { sameRaster } from "@/lib/timing/same-raster";
import { rasterToText } from "@/lib/timing/raster-text";
import { keptForFit, type ModesChoices } from "@/components/modes/store/choices";

/** A raster to choose: one that fits, one near what does not, or the one that was made by hand. */
export type Candidate = FittedRaster & {
  readonly key: string;
  readonly kind: "fits" | "nearest" | "hand";
  readonly changed: readonly FigureChange[];
};

/** Everything that the page shows, made from the choices alone. */
export type ModesAnswer = {
  readonly request: FitRequest;
  readonly outcome: FitOutcome;
  readonly candidates: readonly Candidate[];
  /** The raster in hand; null where nothing fits and nothing is near. */
  readonly hand: Candidate | null;
  readonly findings: readonly Finding[];
  readonly clock: ClockSteps | null;
};

/** Candidates in the table at most, the one made by hand aside. */
const MAX_CANDIDATES = 8;

/** The device's limits as the fit takes them; none where any device will do. */
export function deviceTimingLimits({ device }: ModesChoices): DeviceTimingLimits | undefined {
  return device === null ? undefined : fitLimits(device.limits);
}

/** The refresh is the source's where the output follows the input. */
export function followsSource({ device, source }: ModesChoices): boolean {
  return device?.limits.outputClock === "input" && source !== null;
}

/** What is asked of the engine. Null while the screen is not loaded. */
export function requestOf(choices: ModesChoices): FitRequest | null {
  const { wish, stated, screen, source } = choices;
  if (screen.envelope === null) return null;
  const fieldRateHz = followsSource(choices) && source !== null ? source.fieldRateHz : wish.fieldRateHz;
  return {
    wish: { ...wish, ...stated, fieldRateHz },
    screen: screen.envelope,
    device: deviceTimingLimits(choices),
    keep: keptForFit(choices),
    limit: MAX_CANDIDATES,
  };
}

function candidatesOf({ fits, nearest }: FitOutcome): Candidate[] {
  return [
    ...fits.map((raster) => ({ ...raster, key: rasterToText(raster.timing), kind: "fits" as const, changed: [] })),
    ...nearest.map((raster) => ({ ...raster, key: rasterToText(raster.timing), kind: "nearest" as const })),
  ];
}

function madeByHand(timing: RasterTiming, request: FitRequest): Candidate {
  const raster = fittedRaster(timing, request.wish.fieldRateHz, request.screen, 0);
  return { ...raster, key: rasterToText(timing), kind: "hand", changed: changesOf(request.wish, timing, request.keep) };
}

/**
 * The whole page from the choices: candidates, the raster in hand, what the checks say of it, what its clock can do.
 *
 * Errors: what is wrong with the wish, by path (`activeLines`); `screen` while it is not loaded.
 */
export function answerOf(
  choices: ModesChoices,
): { ok: true; value: ModesAnswer } | { ok: false; error: PathMessage[] } {
  const request = requestOf(choices);
  if (request === null) return { ok: false, error: [{ path: "screen", message: "The screen is being loaded." }] };
  const fitted = fitRaster(request);
  if (!fitted.ok) return fitted;
  const found = candidatesOf(fitted.value);
  const { raster, byHand, device, source } = choices;
  const picked = raster === null ? undefined : found.find(({ timing }) => sameRaster(timing, raster));
  const made = raster !== null && (byHand || picked === undefined) ? madeByHand(raster, request) : null;
  const hand = made ?? picked ?? found[0] ?? null;
  return {
    ok: true,
    value: {
      request,
      outcome: fitted.value,
      candidates: made === null ? found : [made, ...found.filter(({ key }) => key !== made.key)],
      hand,
      findings:
        hand === null
          ? []
          : modeFindings({
              timing: hand.timing,
              screen: request.screen,
              device: device?.limits,
              source: source ?? undefined,
            }),
      clock: hand === null ? null : clockSteps(hand.timing, request.wish.fieldRateHz, request.device),
    },
  };
}
