import { existsSync, mkdirSync, readFileSync, rmSync } from "node:fs";
import path from "node:path";
import { ensureBuild } from "./build.mjs";
import { dataFolder } from "./database.mjs";
import { run } from "./processes.mjs";

const root = path.dirname(import.meta.dirname);
const reports = path.join(dataFolder, `reports-${process.pid}`);

/**
 * What came of a suite. `output` is shown when something failed.
 * @typedef {{ passed: number, failed: number, output: string }} Outcome
 * @typedef {{ name: string, seconds: number, run: () => Promise<Outcome> }} Suite
 */

/** Runs a program of an installed package with this very Node. */
function tool(file, args, env = {}) {
  const program = path.join(root, "node_modules", file);
  return run(process.execPath, [program, ...args], { cwd: root, env: { ...process.env, ...env } });
}

/** A check that either holds or not: it counts as one. */
function single(name, seconds, act) {
  return {
    name,
    seconds,
    run: async () => {
      const { code, output } = await act();
      return code === 0 ? { passed: 1, failed: 0, output } : { passed: 0, failed: 1, output };
    },
  };
}

/** Takes a report that a tool wrote. A tool that failed without a failed test in its report counts as one failure. */
function fromReport(file, { code, output }, count) {
  const report = existsSync(file) ? JSON.parse(readFileSync(file, "utf8")) : null;
  const { passed, failed, skipped } = report === null ? { passed: 0, failed: 0, skipped: 0 } : count(report);
  // A test that did not run proves nothing, so it is not let through.
  const notRun = skipped > 0 ? `\n${skipped} skipped tests count as failed.\n` : "";
  const broken = failed + skipped === 0 && (code !== 0 || passed === 0) ? 1 : 0;
  return { passed, failed: failed + skipped + broken, output: output + notRun };
}

function vitestSuite(name, project, seconds) {
  return {
    name,
    seconds,
    run: async () => {
      mkdirSync(reports, { recursive: true });
      const file = path.join(reports, `${project}.json`);
      const args = ["run", "--project", project, "--reporter=default", "--reporter=json", `--outputFile.json=${file}`];
      const result = await tool("vitest/vitest.mjs", args, { NO_COLOR: "1" });
      return fromReport(file, result, (report) => ({
        passed: report.numPassedTests,
        failed: report.numFailedTests,
        skipped: report.numPendingTests + report.numTodoTests,
      }));
    },
  };
}

function browserSuite(seconds) {
  return {
    name: "Browser",
    seconds,
    run: async () => {
      mkdirSync(reports, { recursive: true });
      const file = path.join(reports, "browser.json");
      const result = await tool("@playwright/test/cli.js", ["test"], { E2E_REPORT: file, NO_COLOR: "1" });
      return fromReport(file, result, ({ stats, errors }) => ({
        passed: stats.expected,
        failed: stats.unexpected + stats.flaky + errors.length,
        skipped: stats.skipped,
      }));
    },
  };
}

/** What oxlint finds with the help of the types, then what the rules of the house find. */
async function lint() {
  const first = await tool("oxlint/bin/oxlint", ["--type-aware", "--tsconfig", "tsconfig.json", "--deny-warnings"]);
  return first.code === 0 ? tool("eslint/bin/eslint.js", [".", "--max-warnings", "0"]) : first;
}

/** The pages' build as a suite: without it the browser tests could not tell what they tested. */
const buildSuite = single("Build", 80, async () => {
  try {
    await ensureBuild(() => undefined);
    return { code: 0, output: "" };
  } catch (error) {
    return { code: 1, output: error.message };
  }
});

/**
 * All suites by lanes: lanes of a stage run side by side (two cores), stages one after the other. The peers talk in
 * real time and the browser uses both cores, so nothing runs beside them.
 *
 * @type {readonly (readonly (readonly Suite[])[])[]}
 */
export const stages = [
  [
    [buildSuite, vitestSuite("Unit", "unit", 95)],
    [
      single("Lint", 70, lint),
      single("Types", 20, () => tool("typescript-7/bin/tsc", ["--noEmit"])),
      vitestSuite("Database", "integration", 60),
    ],
  ],
  [[vitestSuite("Faults", "faults", 100), vitestSuite("Peers", "peers", 20)]],
  [[browserSuite(570)]],
];

/** Removes the reports of this run. */
export function removeReports() {
  rmSync(reports, { recursive: true, force: true });
}
