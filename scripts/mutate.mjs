/**
 * `npm run mutate`: breaks the serial code in each way of `mutate/mutants.mjs`, in a copy, and runs the tests that have to
 * notice. Fails where a break goes unnoticed, where a patch no longer applies, or where the tests fail without any break.
 * With words after `--`: only the ways whose name has one of them.
 */
import { cpSync, mkdtempSync, readdirSync, readFileSync, rmSync, symlinkSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { mutants } from "./mutate/mutants.mjs";
import { end, onSignal, run, stopAll } from "./processes.mjs";

const root = path.dirname(import.meta.dirname);
const scratch = mkdtempSync(path.join(tmpdir(), "backporch-mutate-"));
/** What the tests do not need, or may share. */
const LEFT_OUT = new Set(["node_modules", ".git", ".data", "public", "drizzle"]);
/** A broken module fails every test of it: that proves nothing. */
const NOT_EVEN_CODE = /Transform failed|SyntaxError|Failed to resolve import|No test files found/u;

function copyTree() {
  for (const name of readdirSync(root)) {
    if (LEFT_OUT.has(name) || name.startsWith(".next")) continue;
    cpSync(path.join(root, name), path.join(scratch, name), { recursive: true });
  }
  symlinkSync(path.join(root, "node_modules"), path.join(scratch, "node_modules"));
}

/** Runs test files in the copy until the first failure. */
function test(files) {
  const vitest = path.join(scratch, "node_modules/vitest/vitest.mjs");
  return run(process.execPath, [vitest, "run", "--bail=1", "--reporter=dot", ...files], { cwd: scratch, env: { ...process.env, NO_COLOR: "1" } });
}

/** @returns what is wrong, or null where the break was noticed */
async function tryMutant({ file, find, replace, tests }) {
  const target = path.join(scratch, file);
  const sound = readFileSync(target, "utf8");
  if (sound.split(find).length !== 2) return "does not apply";
  writeFileSync(target, sound.replace(find, () => replace));
  const { code, output } = await test(tests);
  writeFileSync(target, sound);
  if (NOT_EVEN_CODE.test(output)) return `does not even compile\n${output.slice(-2000)}`;
  return code === 0 ? "SURVIVED" : null;
}

async function main() {
  const words = process.argv.slice(2);
  const chosen = mutants.filter(({ name }) => words.length === 0 || words.some((word) => name.includes(word)));
  copyTree();
  const files = [...new Set(chosen.flatMap(({ tests }) => tests))];
  const { code, output } = await test(files);
  if (code !== 0) throw new Error(`The tests fail without any break:\n${output.slice(-4000)}`);
  let wrong = 0;
  for (const mutant of chosen) {
    const problem = await tryMutant(mutant);
    if (problem !== null) wrong += 1;
    console.log(`${problem === null ? "noticed" : problem}: ${mutant.name}`);
  }
  console.log(`${chosen.length - wrong} of ${chosen.length} ways to break the serial code are noticed`);
  return wrong === 0 && chosen.length > 0 ? 0 : 1;
}

async function cleanUp() {
  await stopAll();
  rmSync(scratch, { recursive: true, force: true });
}

onSignal(cleanUp);
let code = 1;
try {
  code = await main();
} catch (error) {
  console.error(error.message);
}
await end(cleanUp, code);
