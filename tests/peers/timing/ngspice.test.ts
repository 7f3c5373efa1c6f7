import { expect, it } from "vitest";
import { attenuator } from "@/lib/timing/attenuator";
import { runOnFile } from "@/tests/peers/timing/run-peer";

type Chain = {
  readonly sourceVpp: number;
  readonly sourceOhm: number;
  readonly seriesOhm: number;
  readonly loadOhm: number;
};

/** Levels at the load of every chain, from one operating point. */
async function levels(chains: readonly Chain[]): Promise<number[]> {
  const parts = chains.flatMap(({ sourceVpp, sourceOhm, seriesOhm, loadOhm }, index) => [
    `V${index} a${index} 0 DC ${sourceVpp}`,
    `RZ${index} a${index} b${index} ${sourceOhm}`,
    `RS${index} b${index} c${index} ${seriesOhm}`,
    `RL${index} c${index} 0 ${loadOhm}`,
  ]);
  const prints = chains.map((_, index) => `print v(c${index})`);
  const netlist = ["resistor chains", ...parts, ".control", "op", ...prints, "quit", ".endc", ".end", ""].join("\n");
  const output = await runOnFile("ngspice", ["-b", "@"], netlist);
  return chains.map((_, index) => Number(new RegExp(`v\\(c${index}\\) = (\\S+)`, "u").exec(output)?.[1]));
}

it("gives within 0.5 mV what every resistor of ours is said to give", async () => {
  const wishes = [0.7, 1, 2.5, 3.3, 5, 12].flatMap((sourceVpp) =>
    [1, 22, 50, 75, 220].flatMap((sourceOhm) =>
      [75, 1000].map((loadOhm) => ({ sourceVpp, sourceOhm, loadOhm, targetVpp: 0.3 })),
    ),
  );
  const answers = wishes.flatMap((wish) => {
    const result = attenuator(wish);
    if (!result.ok) throw new Error(result.error.map(({ message }) => message).join());
    const exact =
      result.value.outcome === "resistor" ? [{ ohm: result.value.seriesOhm, resultVpp: wish.targetVpp }] : [];
    return [...exact, ...result.value.e24].map(({ ohm, resultVpp }) => ({
      chain: { ...wish, seriesOhm: ohm },
      resultVpp,
    }));
  });
  expect(answers.length).toBeGreaterThan(100);
  const measured = await levels(answers.map(({ chain }) => chain));
  answers.forEach(({ resultVpp }, index) => {
    expect(Math.abs((measured[index] ?? NaN) - resultVpp)).toBeLessThan(0.0005);
  });
});

it("recovers the source from two levels that ngspice gives", async () => {
  const source = { sourceVpp: 4.7, sourceOhm: 68, loadOhm: 75 };
  const [open = 0, loaded = 0] = await levels([
    { ...source, seriesOhm: 1e-6 },
    { ...source, seriesOhm: 330 },
  ]);
  const result = attenuator({
    measured: [
      { seriesOhm: 0, vpp: open },
      { seriesOhm: 330, vpp: loaded },
    ],
    loadOhm: 75,
    targetVpp: 0.3,
  });
  if (!result.ok) throw new Error(result.error.map(({ message }) => message).join());
  expect(result.value.sourceVpp).toBeCloseTo(4.7, 3);
  expect(result.value.sourceOhm).toBeCloseTo(68, 2);
});
