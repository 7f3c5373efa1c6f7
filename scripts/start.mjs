/** `npm start`: from a bare machine to the served site. Everything that it starts ends with it. */
import path from "node:path";
import { ensureBuild } from "./build.mjs";
import { openDatabase } from "./database.mjs";
import { checkNode, giveHome, installPackages, isInstalled } from "./install.mjs";
import { Prerequisite } from "./packages.mjs";
import { prepareDatabase, serverEnvironment } from "./prepare.mjs";
import { end, onSignal, start, stopAll, waitUntil } from "./processes.mjs";
import { runSteps } from "./steps.mjs";

const port = Number(process.env.PORT || "3000");
const address = `http://127.0.0.1:${port}`;
const serverStartLimitMs = 60_000;

let database = { url: "", stop: async () => undefined };
let buildFolder = ".next";
let server = null;

async function cleanUp() {
  await stopAll();
  await database.stop();
}

async function serve() {
  const script = path.join(import.meta.dirname, "serve.mjs");
  server = start(process.execPath, [script], { env: serverEnvironment({ url: database.url, port, buildFolder }) });
  let gone = false;
  void server.exit.then(() => (gone = true));
  const answers = () =>
    fetch(`${address}/api/health`).then(
      (response) => response.ok,
      () => false,
    );
  const ready = await waitUntil(async () => gone || (await answers()), serverStartLimitMs);
  if (gone || !ready) throw new Prerequisite(`The server did not start on ${address}.`);
}

async function printWelcome() {
  const { tsImport } = await import("tsx/esm/api");
  const { demoAccounts } = await tsImport("../db/demo/accounts.ts", import.meta.url);
  console.log(`\nBackporch: ${address}\n\nDemo accounts (invented people):`);
  for (const { role, email, password } of demoAccounts)
    console.log(`  ${role.padEnd(11)} ${email.padEnd(34)} ${password}`);
  console.log("\nCtrl-C stops the server and its database.\n");
}

async function main() {
  checkNode();
  giveHome();
  await runSteps([
    { name: "Packages", seconds: isInstalled() ? 1 : 100, act: installPackages },
    { name: "Database", seconds: 8, act: async (say) => void (database = await openDatabase({ kind: "main", say })) },
    { name: "Tables and demo data", seconds: 10, act: () => prepareDatabase(database.url) },
    { name: "Pages", seconds: 60, act: async (say) => void (buildFolder = await ensureBuild(say)) },
    { name: "Server", seconds: 3, act: serve },
  ]);
  await printWelcome();
  return server.exit;
}

onSignal(cleanUp);
let code = 1;
try {
  code = await main();
} catch (error) {
  console.error(error instanceof Prerequisite ? error.message : error);
}
await end(cleanUp, code);
