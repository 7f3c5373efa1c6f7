import { readFileSync } from "node:fs";
import ts from "typescript";
import { describe, expect, it } from "vitest";
import { mutants } from "@/scripts/mutate/mutants.mjs";

describe("the ways to break the serial code", () => {
  it("are twenty at least, each with a name of its own, and break nothing outside it", () => {
    expect(mutants.length).toBeGreaterThanOrEqual(20);
    expect(new Set(mutants.map(({ name }) => name)).size).toBe(mutants.length);
    for (const { file } of mutants) expect(file).toMatch(/^lib\/serial\//u);
  });

  it.each(mutants.map((mutant) => [mutant.name, mutant] as const))("still applies, and leaves code: %s", (_name, { file, find, replace, tests }) => {
    const sound = readFileSync(file, "utf8");
    expect(sound.split(find)).toHaveLength(2);
    const broken = sound.replace(find, () => replace);
    expect(broken).not.toBe(sound);
    expect(ts.transpileModule(broken, { reportDiagnostics: true, compilerOptions: { target: ts.ScriptTarget.ESNext } }).diagnostics).toEqual([]);
    for (const test of tests) expect(readFileSync(test, "utf8").length).toBeGreaterThan(0);
  });
});
