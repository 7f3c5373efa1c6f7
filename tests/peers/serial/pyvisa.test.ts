import { execFile } from "node:child_process";
import path from "node:path";
import { promisify } from "node:util";
import { describe, expect, test } from "vitest";
import ieee488 from "@/tests/fixtures/standards/ieee488.json";
import { withPty } from "./sim-process";

const run = promisify(execFile);

/** Debian's own interpreter: the modules come from Debian's packages. */
async function ask(terminal: string, queries: readonly string[]): Promise<string[]> {
  const script = path.join(import.meta.dirname, "ask-by-pyvisa.py");
  const { stdout } = await run("/usr/bin/python3", [script, terminal, "115200", ...queries]);
  return JSON.parse(stdout) as string[];
}

// Forms: tests/fixtures/standards/ieee488.json, from instrument manuals as cited in it.
const forms: Record<string, RegExp> = {
  "*IDN?": /^[^,]+,[^,]+,[^,]+,[^,]+$/u,
  "*OPC?": /^1$/u,
  "SYST:ERR?": /^[+-]?\d+,"[^"]*"$/u,
};

describe("PyVISA, a client that knows nothing of us", () => {
  test("gets the forms of IEEE 488.2 and SCPI from the LF-8", async () => {
    const queries = Object.keys(forms);
    for (const query of queries) expect(ieee488.queries.map(({ q }) => q)).toContain(query);
    await withPty("lanternfield-lf8", async (terminal) => {
      const answers = await ask(terminal, queries);
      queries.forEach((query, index) => expect(answers[index]).toMatch(forms[query]!));
      expect(answers[queries.indexOf("*IDN?")]).toMatch(/^Lanternfield,LF-8,/u);
    });
  });

  test("finds an unknown command in the error queue, first in first out, and then no error", async () => {
    await withPty("lanternfield-lf8", async (terminal) => {
      const [empty] = await ask(terminal, ["SYST:ERR?"]);
      expect(empty).toBe('0,"No error"');
      const answers = await ask(terminal, ["NO:SUCH:WORD", "SYST:ERR?", "SYST:ERR?"]);
      expect(answers[0]).toMatch(new RegExp(`^-113,"${ieee488.errors["-113"]}`, "u"));
      expect(answers[1]).toBe('0,"No error"');
    });
  });
});
