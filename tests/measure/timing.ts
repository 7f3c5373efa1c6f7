import { checkProfile } from "@/lib/profile/check/check-profile";
import { PROFILE_FORMAT, PROFILE_VERSION } from "@/lib/profile/document";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { deviceLimits } from "@/lib/serial/limits";
import { catalogue } from "@/lib/timing/catalogue/catalogue";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { fitRaster } from "@/lib/timing/fit/fit-raster";
import type { FitWish } from "@/lib/timing/fit/fit-types";
import { judgeBlanking } from "@/lib/timing/judge-blanking";
import { judgeEnvelope } from "@/lib/timing/judge-envelope";
import { screenPresets } from "@/lib/timing/screen-presets";

/** One measured figure and what it may be at most. */
export type TimingMeasurement = {
  readonly name: string;
  readonly value: number;
  readonly unit: string;
  readonly limit: number;
};

const RUNS = 25;

/** The least of `RUNS` runs in ms, after as many that warm up: what the machine's other work adds is not ours. */
function leastMs(run: () => void): number {
  for (let index = 0; index < RUNS; index += 1) run();
  const times = Array.from({ length: RUNS }, () => {
    const start = performance.now();
    run();
    return performance.now() - start;
  });
  return Math.min(...times);
}

const wide: ScreenEnvelope = { name: "wide band", bands: [{ lineRateHz: [15_000, 80_000], fieldRateHz: [45, 100] }] };
const device = { clockHz: { min: 5e6, max: 165e6, step: 50_000 } };
const wish: FitWish = { activeLines: 240, activePx: 1440, fieldRateHz: 60, interlaced: false };

function fit(request: Parameters<typeof fitRaster>[0], fits: boolean): void {
  const result = fitRaster(request);
  if (!result.ok || result.value.fits.length > 0 !== fits) throw new Error("not the outcome that is measured");
}

const lf8 = deviceLimits(lanternfieldLf8);

/** 24 modes of which a television takes none, each shown by a slot: the most that a check has to search for. */
const misfits = catalogue.filter(({ timing }) => timing.pixelClockHz / timing.vertical.active > 1e5).slice(-24);
const misfitDocument = {
  format: PROFILE_FORMAT,
  version: PROFILE_VERSION,
  modes: misfits.map(({ id, timing }) => ({ key: id, timing })),
  slots: misfits.map(({ id }, number) => ({ number: number + 1, mode: id })),
} as const;

/**
 * How long the engine takes: a fit in a wide band, the answer when nothing fits, a check that searches for the nearest
 * rasters, the whole catalogue against a screen.
 */
export function measureTiming(): Promise<TimingMeasurement[]> {
  const television = screenPresets[0]?.envelope ?? wide;
  const figures: TimingMeasurement[] = [
    {
      name: "fit 240 lines in a wide band",
      value: leastMs(() => fit({ wish, screen: wide, device }, true)),
      unit: "ms",
      limit: 20,
    },
    {
      name: "fit 1080 lines in a wide band",
      value: leastMs(() => fit({ wish: { ...wish, activeLines: 1080, activePx: 1920 }, screen: wide, device }, true)),
      unit: "ms",
      limit: 20,
    },
    {
      name: "270 lines that fit nowhere, with reasons and the nearest",
      value: leastMs(() => fit({ wish: { ...wish, activeLines: 270 }, screen: television, device }, false)),
      unit: "ms",
      limit: 100,
    },
    {
      name: "a check of 24 modes that do not fit, with the nearest rasters",
      value: leastMs(() => {
        const document = {
          ...misfitDocument,
          modes: [...misfitDocument.modes],
          slots: [...misfitDocument.slots],
        };
        const stops = checkProfile({ document, device: lf8, screen: television }).filter(
          ({ rule }) => rule === "screen.line-rate",
        );
        if (stops.length !== 24) throw new Error("not the document that is measured");
      }),
      unit: "ms",
      limit: 100,
    },
    {
      name: "the whole catalogue against a screen",
      value: leastMs(() => {
        for (const { timing } of catalogue) {
          judgeEnvelope(timing, television);
          judgeBlanking(timing);
        }
      }),
      unit: "ms",
      limit: 50,
    },
  ];
  return Promise.resolve(figures);
}
