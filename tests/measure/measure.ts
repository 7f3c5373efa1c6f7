import { readdirSync, writeFileSync } from "node:fs";
import path from "node:path";

/** One figure and the most that it may be (with `atLeast` the least), in the same unit. */
export type Measurement = {
  readonly name: string;
  readonly value: number;
  readonly unit: string;
  readonly limit: number;
  readonly atLeast?: boolean;
};

type Measure = () => Promise<readonly Measurement[]>;

/** Every `measure…` function that the files beside this one export, by file and name. */
async function findMeasures(): Promise<readonly (readonly [string, Measure])[]> {
  const files = readdirSync(import.meta.dirname).filter((file) => file.endsWith(".ts") && file !== "measure.ts");
  const found: (readonly [string, Measure])[] = [];
  for (const file of files.sort()) {
    const exported = (await import(path.join(import.meta.dirname, file))) as Record<string, unknown>;
    for (const [name, measure] of Object.entries(exported)) {
      // The cast holds by the convention of this folder; what comes back is checked before it is used.
      if (name.startsWith("measure") && typeof measure === "function") found.push([`${file} ${name}`, measure as Measure]);
    }
  }
  return found;
}

function isWithin({ value, limit, atLeast }: Measurement): boolean {
  return atLeast ? value >= limit : value <= limit;
}

function line(measurement: Measurement): string {
  const { name, value, unit, limit, atLeast } = measurement;
  const share = (value / limit).toFixed(3);
  const verdict = isWithin(measurement) ? "within" : atLeast ? "UNDER" : "OVER";
  return `${name.padEnd(60)} ${value.toPrecision(5).padStart(12)} ${unit.padEnd(8)} limit ${limit.toPrecision(5)}  ${share} ${verdict}`;
}

/** As it is written: the ratio to the limit or peer comes last. */
const measurements: (Measurement & { readonly ratio: number })[] = [];
for (const [name, measure] of await findMeasures()) {
  for (const one of await measure()) {
    if (!Number.isFinite(one.value) || !(one.limit > 0)) throw new Error(`${name}: ${one.name} is no figure.`);
    measurements.push({ ...one, ratio: one.value / one.limit });
    console.log(line(one));
  }
}
writeFileSync("measurements.json", `${JSON.stringify(measurements, null, 2)}\n`);
if (measurements.length === 0) throw new Error("Nothing was measured.");
process.exit(measurements.every(isWithin) ? 0 : 1);
