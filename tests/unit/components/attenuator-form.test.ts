import { describe, expect, it } from "vitest";
import { readAttenuator, writeAttenuator } from "@/components/attenuator/attenuator-address";
import type { AttenuatorState } from "@/components/attenuator/attenuator-address";
import { goalOf, workOut } from "@/components/attenuator/attenuator-form";
import { nearestPart } from "@/components/attenuator/attenuator-result";
import { screenPresets } from "@/lib/timing/screen-presets";
import { readStandard } from "@/tests/fixtures/standards/read";

const atFirst = readAttenuator(new URLSearchParams());
const nominal = goalOf(null);
const points = readStandard<{ ngspice: { vsrc: number; zsrc: number; rs: number; vload: number }[] }>(
  "attenuation.json",
).ngspice;

describe("the address of Attenuator", () => {
  it("holds every figure as it was typed", () => {
    const state: AttenuatorState = {
      ...atFirst,
      way: "readings",
      firstOhm: "0",
      firstVpp: "3,472",
      secondOhm: "75",
      secondVpp: "2.05 V",
      termination: "other",
      readingOhm: "82",
      screen: "bt470-525",
      targetVpp: "0.35",
    };
    expect(readAttenuator(new URLSearchParams(writeAttenuator(state).toString()))).toEqual(state);
    expect(writeAttenuator(atFirst).toString()).toBe("");
  });
});

describe("what Attenuator works out", () => {
  // Operating points of ngspice, in attenuation.json: 75 Ω of load.
  it.each(points)("$vsrc V behind $zsrc Ω comes down to $vload V by $rs Ω", ({ vsrc, zsrc, rs, vload }) => {
    const state = { ...atFirst, sourceVpp: String(vsrc), sourceOhm: String(zsrc), targetVpp: String(vload) };
    const { answer } = workOut(state, nominal);
    expect(answer?.outcome).toBe("resistor");
    expect(Math.abs((answer?.seriesOhm ?? 0) - rs)).toBeLessThan(0.05);
    if (answer === null) throw new Error("no answer");
    const part = nearestPart(answer, vload);
    expect(part?.ohm).toBe(rs);
    expect(Math.abs((part?.resultVpp ?? 0) - vload)).toBeLessThan(0.0005);
  });

  it("finds the source from two readings over 75 Ω", () => {
    // 5 V behind 33 Ω: 390 and 620 Ω in line, as ngspice has them.
    const [first, second] = points.filter(({ zsrc, vsrc }) => zsrc === 33 && vsrc === 5);
    if (first === undefined || second === undefined) throw new Error("points");
    const state: AttenuatorState = {
      ...atFirst,
      way: "readings",
      termination: "75",
      firstOhm: String(first.rs),
      firstVpp: String(first.vload),
      secondOhm: String(second.rs),
      secondVpp: String(second.vload),
    };
    const { answer } = workOut(state, nominal);
    expect(answer?.sourceVpp).toBeCloseTo(5, 2);
    expect(answer?.sourceOhm).toBeCloseTo(33, 0);
  });

  it("asks what the readings were terminated with, and takes no open input", () => {
    const readings: AttenuatorState = {
      ...atFirst,
      way: "readings",
      firstOhm: "0",
      firstVpp: "3.5",
      secondOhm: "75",
      secondVpp: "2",
    };
    expect(workOut(readings, nominal)).toMatchObject({ answer: null, missing: ["readingOhm"] });
    expect(workOut({ ...readings, termination: "none" }, nominal).errors.termination).toContain(
      "says nothing of the source",
    );
    expect(workOut({ ...readings, termination: "75", secondVpp: "4" }, nominal).errors.readings).toContain(
      "terminated alike",
    );
  });

  it("names what is still needed, and what is no figure", () => {
    expect(workOut(atFirst, nominal).missing).toEqual(["sourceVpp", "sourceOhm"]);
    const wrong = workOut({ ...atFirst, sourceVpp: "five", sourceOhm: "-3" }, nominal);
    expect(wrong.errors.sourceVpp).toBe("This is no figure.");
    expect(workOut({ ...atFirst, sourceVpp: "5", sourceOhm: "-3" }, nominal).errors.sourceOhm).toContain("0 or more");
  });

  it("aims at the middle of what a screen takes, into its load", () => {
    const television = screenPresets.find(({ id }) => id === "bt470-525")?.envelope ?? null;
    expect(goalOf(television)).toEqual({ loadOhm: 75, targetVpp: 0.4, takesVpp: [0.2, 0.6] });
    const { answer } = workOut({ ...atFirst, sourceVpp: "0.3", sourceOhm: "75" }, goalOf(television));
    expect(answer?.outcome).toBe("too-weak");
  });
});
