import { fail, ok, type PathMessage, type Result } from "@/lib/result";
import { figure, withUnit } from "@/lib/timing/figure-text";

/** One reading: the resistor that was in series, and the level at the termination, peak to peak. */
export type AttenuatorReading = { readonly seriesOhm: number; readonly vpp: number };

export type AttenuatorInput =
  | {
      /** Open-circuit level of the source, peak to peak. */
      readonly sourceVpp: number;
      readonly sourceOhm: number;
      readonly loadOhm: number;
      readonly targetVpp: number;
    }
  | {
      readonly measured: readonly [AttenuatorReading, AttenuatorReading];
      /** What the readings were terminated with; `loadOhm` where absent. An open input tells nothing of the source. */
      readonly readingOhm?: number | undefined;
      readonly loadOhm: number;
      readonly targetVpp: number;
    };

export type AttenuatorAnswer = {
  readonly sourceVpp: number;
  readonly sourceOhm: number;
  /** The exact resistor; 0 where none is needed or where it is too weak already. */
  readonly seriesOhm: number;
  /** The nearest preferred values below and above, with what they give at the load. */
  readonly e24: readonly { readonly ohm: number; readonly resultVpp: number }[];
  /** `too-weak`: only an amplifier helps. */
  readonly outcome: "resistor" | "direct" | "too-weak";
  readonly caution: string;
};

/** Preferred values of one decade. Source: IEC 60063, E24. */
const E24 = [10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30, 33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91];

/** E24 from 1 Ω to 9.1 MΩ, rising. */
const preferredOhms = [-1, 0, 1, 2, 3, 4, 5].flatMap((decade) =>
  E24.map((value) => Number((value * 10 ** decade).toPrecision(2))),
);

/** A source within this share of the target is right as it is. */
const RIGHT_AS_IT_IS = 0.02;

const MEASURE_FIRST =
  "Measure with the load connected before and after: the level and impedance of a source are seldom what its sheet says.";

/** Level at the load. One resistor chain: source impedance, series resistor, load. */
export function loadVpp(sourceVpp: number, sourceOhm: number, seriesOhm: number, loadOhm: number): number {
  return (sourceVpp * loadOhm) / (sourceOhm + seriesOhm + loadOhm);
}

function nearestE24(seriesOhm: number): number[] {
  const above = preferredOhms.findIndex((ohm) => ohm >= seriesOhm * (1 - 1e-9));
  if (above < 0) return preferredOhms.slice(-1);
  const exact = Math.abs((preferredOhms[above] ?? 0) / seriesOhm - 1) < 1e-9;
  return preferredOhms.slice(exact ? above : Math.max(0, above - 1), above + 1);
}

function problemsOf(
  figures: Readonly<Record<string, number | undefined>>,
  zeroAllowed: ReadonlySet<string>,
): PathMessage[] {
  return Object.entries(figures).flatMap(([path, value]) => {
    if (value === undefined) return [];
    const least = zeroAllowed.has(path) ? 0 : Number.MIN_VALUE;
    if (Number.isFinite(value) && value >= least && value <= 1e9) return [];
    return [{ path, message: `Must be a number ${least === 0 ? "of 0 or more" : "above 0"}.` }];
  });
}

/**
 * Level and impedance of a source from two readings over the same termination.
 *
 * V = S · T / (Z + R + T) for each reading, so Z + T = (V₂ · R₂ − V₁ · R₁) / (V₁ − V₂).
 */
function sourceFrom(
  first: AttenuatorReading,
  second: AttenuatorReading,
  readingOhm: number,
): Result<{ sourceVpp: number; sourceOhm: number }, PathMessage[]> {
  const drop = first.vpp - second.vpp;
  const rise = second.seriesOhm - first.seriesOhm;
  if (rise === 0)
    return fail([{ path: "measured", message: "Both readings have the same resistor: one more, or none, is needed." }]);
  if (drop * rise <= 0) {
    return fail([
      {
        path: "measured",
        message: "The larger resistor should give the lower level. Were both readings terminated alike?",
      },
    ]);
  }
  const total = (second.vpp * second.seriesOhm - first.vpp * first.seriesOhm) / drop;
  const sourceOhm = total - readingOhm;
  if (sourceOhm < -0.01 * readingOhm) {
    const message = `The readings do not go with a termination of ${figure(readingOhm)} Ω: the source would be below 0 Ω.`;
    return fail([{ path: "readingOhm", message }]);
  }
  return ok({ sourceVpp: (first.vpp * (total + first.seriesOhm)) / readingOhm, sourceOhm: Math.max(0, sourceOhm) });
}

function readSource(input: AttenuatorInput): Result<{ sourceVpp: number; sourceOhm: number }, PathMessage[]> {
  if (!("measured" in input)) {
    const { sourceVpp, sourceOhm, loadOhm, targetVpp } = input;
    const problems = problemsOf({ sourceVpp, sourceOhm, loadOhm, targetVpp }, new Set(["sourceOhm"]));
    return problems.length > 0 ? fail(problems) : ok({ sourceVpp, sourceOhm });
  }
  const [first, second] = input.measured;
  const figures = {
    "measured[0].seriesOhm": first.seriesOhm,
    "measured[0].vpp": first.vpp,
    "measured[1].seriesOhm": second.seriesOhm,
    "measured[1].vpp": second.vpp,
    readingOhm: input.readingOhm,
    loadOhm: input.loadOhm,
    targetVpp: input.targetVpp,
  };
  const problems = problemsOf(figures, new Set(["measured[0].seriesOhm", "measured[1].seriesOhm"]));
  if (problems.length > 0) return fail(problems);
  return sourceFrom(first, second, input.readingOhm ?? input.loadOhm);
}

/**
 * The series resistor that brings a sync output to a screen's level.
 *
 * @returns R = load · source / target − load − impedance, the E24 values about it and what they give, a caution.
 * Errors: by path; two readings that no source explains are told as such.
 */
export function attenuator(input: AttenuatorInput): Result<AttenuatorAnswer, PathMessage[]> {
  const source = readSource(input);
  if (!source.ok) return source;
  const { sourceVpp, sourceOhm } = source.value;
  const { loadOhm, targetVpp } = input;
  const direct = loadVpp(sourceVpp, sourceOhm, 0, loadOhm);
  const seriesOhm = (loadOhm * sourceVpp) / targetVpp - loadOhm - sourceOhm;
  const none = { sourceVpp, sourceOhm, seriesOhm: 0, e24: [] };
  if (Math.abs(direct / targetVpp - 1) <= RIGHT_AS_IT_IS) {
    return ok({
      ...none,
      outcome: "direct",
      caution: `It gives ${withUnit(direct, "V", 3)} without a resistor. ${MEASURE_FIRST}`,
    });
  }
  if (direct < targetVpp) {
    const caution = `Too weak: without a resistor it gives ${withUnit(direct, "V", 3)}. Only an amplifier helps.`;
    return ok({ ...none, outcome: "too-weak", caution });
  }
  const e24 = nearestE24(seriesOhm).map((ohm) => ({ ohm, resultVpp: loadVpp(sourceVpp, sourceOhm, ohm, loadOhm) }));
  return ok({
    sourceVpp,
    sourceOhm,
    seriesOhm,
    e24,
    outcome: "resistor",
    caution: `Too strong as it is: ${withUnit(direct, "V", 3)}. ${MEASURE_FIRST}`,
  });
}
