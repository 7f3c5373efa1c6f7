/** `npm run dev`: the development server over the same database as `npm start`. */
import path from "node:path";
import { openDatabase } from "./database.mjs";
import { checkNode, giveHome, installPackages } from "./install.mjs";
import { Prerequisite } from "./packages.mjs";
import { prepareDatabase, serverEnvironment } from "./prepare.mjs";
import { end, onSignal, start, stopAll } from "./processes.mjs";

const root = path.dirname(import.meta.dirname);
const port = Number(process.env.PORT || "3000");
const say = (what, seconds) => console.log(`${what}, about ${seconds} s`);

let database = { url: "", stop: async () => undefined };

async function cleanUp() {
  await stopAll();
  await database.stop();
}

async function main() {
  checkNode();
  giveHome();
  await installPackages(say);
  database = await openDatabase({ kind: "main", say });
  await prepareDatabase(database.url);
  const next = path.join(root, "node_modules/next/dist/bin/next");
  const env = { ...serverEnvironment({ url: database.url, port, buildFolder: ".next" }), NODE_ENV: "development" };
  return start(process.execPath, [next, "dev", "-H", "127.0.0.1", "-p", String(port)], { cwd: root, env }).exit;
}

onSignal(cleanUp);
let code = 1;
try {
  code = await main();
} catch (error) {
  console.error(error instanceof Prerequisite ? error.message : error);
}
await end(cleanUp, code);
