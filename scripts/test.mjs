/** `npm test`: everything that proves the project, from a bare machine. The last line is `N passed, N failed`. */
import { checkNode, giveHome, installPackages } from "./install.mjs";
import { ensurePackages, Prerequisite } from "./packages.mjs";
import { end, onSignal, stopAll } from "./processes.mjs";
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

/** Suites that are over. */
const done = new Set();
const laneSeconds = (lane) => lane.reduce((sum, suite) => sum + (done.has(suite) ? 0 : suite.seconds), 0);
const suiteSecondsLeft = () => stages.reduce((sum, stage) => sum + Math.max(...stage.map(laneSeconds)), 0);

const total = { passed: 0, failed: 0 };
const failures = [];

/** Says what begins. A suite's own time is part of what is left; an installation's comes on top. */
function say(what, seconds, onTop = seconds) {
  console.log(`${what}: ${aboutTime(seconds)}; ${aboutTime(onTop + suiteSecondsLeft())} left in all`);
}

async function runSuite(suite) {
  say(suite.name, suite.seconds, 0);
  const startedMs = Date.now();
  const outcome = await suite.run().catch((error) => ({ passed: 0, failed: 1, output: error.stack }));
  total.passed += outcome.passed;
  total.failed += outcome.failed;
  done.add(suite);
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
  // One mostly waits for the disk, the other for the network.
  await Promise.all([ensurePackages(programs, say), installPackages(say)]);
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
if (failures.length > 0) console.log(`Failed: ${failures.join(", ")}`);
console.log(`${total.passed} passed, ${total.failed} failed`);
await end(cleanUp, total.failed === 0 ? 0 : 1);
