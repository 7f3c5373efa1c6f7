/** `npm test`: everything that proves the project, from a bare machine. The last line is `N passed, N failed`. */
import { checkNode, giveHome, installPackages, isInstalled } from "./install.mjs";
import { ensurePackages, Prerequisite } from "./packages.mjs";
import { onSignal, stopAll } from "./processes.mjs";
import { aboutTime } from "./steps.mjs";
import { removeReports, stages } from "./suites.mjs";

const programs = [
  "postgresql",
  "chromium",
  "socat",
  "edidDecode",
  "mbpoll",
  "libmodbus",
  "pkgConfig",
  "compiler",
  "pyvisa",
  "pyserial",
  "ngspice",
];

const laneSeconds = (lane) => lane.reduce((sum, suite) => sum + suite.seconds, 0);
const stageSeconds = (stage) => Math.max(...stage.map(laneSeconds));

const total = { passed: 0, failed: 0 };
const failures = [];
let plannedEndMs = 0;

function say(what, seconds) {
  const leftSeconds = Math.max(seconds, (plannedEndMs - Date.now()) / 1000);
  console.log(`${what}: ${aboutTime(seconds)}; ${aboutTime(leftSeconds)} left in all`);
}

async function runSuite(suite) {
  say(suite.name, suite.seconds);
  const startedMs = Date.now();
  const outcome = await suite.run().catch((error) => ({ passed: 0, failed: 1, output: error.stack }));
  total.passed += outcome.passed;
  total.failed += outcome.failed;
  const tookSeconds = Math.round((Date.now() - startedMs) / 1000);
  console.log(`${suite.name}: ${outcome.passed} passed, ${outcome.failed} failed, in ${tookSeconds} s`);
  if (outcome.failed > 0) {
    failures.push(suite.name);
    console.log(`\n----- ${suite.name} -----\n${outcome.output.trim()}\n----- end of ${suite.name} -----\n`);
  }
}

async function runLane(lane) {
  for (const suite of lane) await runSuite(suite);
}

async function main() {
  checkNode();
  giveHome();
  const installSeconds = isInstalled() ? 0 : 100;
  const suiteSeconds = stages.reduce((sum, stage) => sum + stageSeconds(stage), 0);
  plannedEndMs = Date.now() + (installSeconds + suiteSeconds) * 1000;
  await ensurePackages(programs, say);
  await installPackages(say);
  plannedEndMs = Date.now() + suiteSeconds * 1000;
  for (const stage of stages) await Promise.all(stage.map(runLane));
}

async function cleanUp() {
  await stopAll();
  removeReports();
}

onSignal(cleanUp);
try {
  await main();
} catch (error) {
  total.failed += 1;
  console.error(error instanceof Prerequisite ? error.message : error);
}
await cleanUp();
if (failures.length > 0) console.log(`Failed: ${failures.join(", ")}`);
console.log(`${total.passed} passed, ${total.failed} failed`);
process.exitCode = total.failed === 0 ? 0 : 1;
