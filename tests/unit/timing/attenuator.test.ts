import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { attenuator, loadVpp, type AttenuatorInput } from "@/lib/timing/attenuator";
import { readStandard } from "@/tests/fixtures/standards/read";

const published = readStandard<{
  e24: number[];
  ngspice: { vsrc: number; zsrc: number; rs: number; vload: number }[];
}>("attenuation.json");

const answer = (input: AttenuatorInput) => {
  const result = attenuator(input);
  if (!result.ok) throw new Error(result.error.map(({ message }) => message).join());
  return result.value;
};
const paths = (input: AttenuatorInput) => {
  const result = attenuator(input);
  return result.ok ? [] : result.error.map(({ path }) => path);
};

describe("attenuator", () => {
  // Source: tests/fixtures/standards/attenuation.json, ngspice `.op` of one resistor chain into 75 Ω.
  it.each(published.ngspice)("agrees with ngspice at $vsrc V, $zsrc Ω, $rs Ω", ({ vsrc, zsrc, rs, vload }) => {
    expect(Math.abs(loadVpp(vsrc, zsrc, rs, 75) - vload)).toBeLessThan(0.0005);
    const { seriesOhm, e24 } = answer({ sourceVpp: vsrc, sourceOhm: zsrc, loadOhm: 75, targetVpp: vload });
    expect(Math.abs(seriesOhm / rs - 1)).toBeLessThan(1e-4);
    expect(e24.map(({ ohm }) => ohm)).toContain(rs);
  });

  it("offers the E24 values on either side, and what they give", () => {
    // By hand: 75 · 5 / 0.3 − 75 − 75 = 1100; IEC 60063 has 1.1 kΩ.
    expect(answer({ sourceVpp: 5, sourceOhm: 75, loadOhm: 75, targetVpp: 0.3 })).toMatchObject({
      seriesOhm: 1100,
      e24: [{ ohm: 1100 }],
    });
    fc.assert(
      fc.property(
        fc.double({ min: 0.35, max: 12, noNaN: true }),
        fc.double({ min: 0, max: 300, noNaN: true }),
        (sourceVpp, sourceOhm) => {
          const { outcome, seriesOhm, e24 } = answer({ sourceVpp, sourceOhm, loadOhm: 75, targetVpp: 0.3 });
          if (outcome !== "resistor") return;
          const series = new Set(
            published.e24.flatMap((value) =>
              [-1, 0, 1, 2].map((decade) => Number((value * 10 ** decade).toPrecision(2))),
            ),
          );
          for (const { ohm, resultVpp } of e24) {
            expect(series.has(ohm)).toBe(true);
            expect(resultVpp).toBeCloseTo((sourceVpp * 75) / (sourceOhm + ohm + 75), 12);
          }
          // Below 1 Ω there is only the first value above.
          if (e24.length === 2) expect([e24[0]!.ohm < seriesOhm, e24[1]!.ohm > seriesOhm]).toEqual([true, true]);
        },
      ),
    );
  });

  it("finds the source from two readings over the same termination", () => {
    const vpp = (seriesOhm: number, termination: number) => loadVpp(4.2, 51, seriesOhm, termination);
    const measured = [
      { seriesOhm: 0, vpp: vpp(0, 75) },
      { seriesOhm: 470, vpp: vpp(470, 75) },
    ] as const;
    const found = answer({ measured, loadOhm: 75, targetVpp: 0.3 });
    expect(found.sourceVpp).toBeCloseTo(4.2, 9);
    expect(found.sourceOhm).toBeCloseTo(51, 9);
    const other = answer({
      measured: [
        { seriesOhm: 0, vpp: vpp(0, 50) },
        { seriesOhm: 470, vpp: vpp(470, 50) },
      ],
      readingOhm: 50,
      loadOhm: 75,
      targetVpp: 0.3,
    });
    expect(other.seriesOhm).toBeCloseTo(found.seriesOhm, 6);
  });

  it("says where only an amplifier helps, and where nothing is needed", () => {
    expect(answer({ sourceVpp: 0.4, sourceOhm: 75, loadOhm: 75, targetVpp: 0.3 })).toMatchObject({
      outcome: "too-weak",
      e24: [],
    });
    expect(answer({ sourceVpp: 0.6, sourceOhm: 75, loadOhm: 75, targetVpp: 0.3 })).toMatchObject({
      outcome: "direct",
      seriesOhm: 0,
    });
  });

  it("refuses readings that no source explains", () => {
    const given = (first: number, second: number, ohm = 470) =>
      paths({
        measured: [
          { seriesOhm: 0, vpp: first },
          { seriesOhm: ohm, vpp: second },
        ],
        loadOhm: 75,
        targetVpp: 0.3,
      });
    expect(given(0.5, 0.5)).toEqual(["measured"]);
    expect(given(0.3, 0.5)).toEqual(["measured"]);
    expect(given(0.5, 0.3, 0)).toEqual(["measured"]);
    expect(given(10, 0.5)).toEqual(["readingOhm"]);
  });

  it("refuses what is no figure", () => {
    expect(paths({ sourceVpp: Number.NaN, sourceOhm: -1, loadOhm: 0, targetVpp: Infinity })).toEqual([
      "sourceVpp",
      "sourceOhm",
      "loadOhm",
      "targetVpp",
    ]);
  });
});
