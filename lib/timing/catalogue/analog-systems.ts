import type { Span } from "@/lib/timing/envelope";

/** An analogue television system: the spans that its document allows. */
export type AnalogSystem = {
  readonly name: "525/60" | "625/50";
  readonly frameLines: number;
  readonly lineRateHz: number;
  readonly fieldRateHz: number;
  readonly lineBlankUs: Span;
  readonly frontPorchUs: Span;
  readonly syncUs: Span;
  /** Field blanking in lines: "19 to 21 H + a", where a is the line blanking that the last of them begins with. */
  readonly fieldBlankLines: Span;
  /** Equalising pulses before the field sync, and the field sync itself, in lines. */
  readonly equalisingLines: number;
  readonly fieldSyncLines: number;
};

/**
 * 525/60 and 625/50.
 *
 * Source: ITU-R BT.470-5 (525/60: line blanking 10.9 ± 0.2 µs, front porch 1.27 to 2.22, sync 4.7 ± 0.1, field blanking
 * 19 to 21 lines + a, pulses 3 / 3 / 3 lines; 625/50: 12 ± 0.3, 1.5 ± 0.3, 4.7 ± 0.2, 25 lines + a, 2.5 / 2.5 / 2.5).
 */
export const analogSystems: readonly AnalogSystem[] = [
  {
    name: "525/60",
    frameLines: 525,
    lineRateHz: 4_500_000 / 286,
    fieldRateHz: 60_000 / 1001,
    lineBlankUs: [10.7, 11.1],
    frontPorchUs: [1.27, 2.22],
    syncUs: [4.6, 4.8],
    fieldBlankLines: [19, 21],
    equalisingLines: 3,
    fieldSyncLines: 3,
  },
  {
    name: "625/50",
    frameLines: 625,
    lineRateHz: 15_625,
    fieldRateHz: 50,
    lineBlankUs: [11.7, 12.3],
    frontPorchUs: [1.2, 1.8],
    syncUs: [4.5, 4.9],
    fieldBlankLines: [25, 25],
    equalisingLines: 2.5,
    fieldSyncLines: 2.5,
  },
];

/** Back porch that the other three spans leave, in µs: 3.68 to 5.23 for 525/60. */
export function analogBackPorchUs(system: AnalogSystem): Span {
  const [blank, front, sync] = [system.lineBlankUs, system.frontPorchUs, system.syncUs];
  return [blank[0] - front[1] - sync[1], blank[1] - front[0] - sync[0]];
}
