/** The server of the browser tests: the production build over a new database with the demo in it. */
import path from "node:path";
import { ensureBuild } from "./build.mjs";
import { openDatabase } from "./database.mjs";
import { prepareDatabase, serverEnvironment } from "./prepare.mjs";
import { end, onSignal, run, start, stopAll } from "./processes.mjs";
import { postgresBin } from "./packages.mjs";

const say = (what) => console.log(what);
let database = { url: "", stop: async () => undefined };
let dropOwn = async () => undefined;

async function cleanUp() {
  await stopAll();
  await dropOwn();
  await database.stop();
}

/** A database beside the opened one, so that a given DATABASE_URL keeps its own data untouched. */
async function ownDatabase() {
  database = await openDatabase({ kind: "test", say });
  const url = new URL(database.url);
  const name = `browser_${process.pid}`;
  const tool = (program, ...args) => {
    const env = { ...process.env, PGPASSWORD: decodeURIComponent(url.password) };
    const where = ["-h", url.hostname, "-p", url.port || "5432", "-U", decodeURIComponent(url.username)];
    return run(path.join(postgresBin() ?? "", program), [...where, ...args], { env });
  };
  const { code, output } = await tool("createdb", name);
  if (code !== 0) throw new Error(`The database for the browser tests could not be made:\n${output}`);
  dropOwn = () => tool("dropdb", "--force", name);
  url.pathname = `/${name}`;
  return url.href;
}

async function main() {
  const buildFolder = await ensureBuild(say);
  const url = await ownDatabase();
  await prepareDatabase(url);
  // One proxy is assumed, so that each test can state an address of its own and has limits of its own.
  const env = {
    ...serverEnvironment({ url, port: process.env.PORT, buildFolder }),
    PROXY_HOPS: "1",
    LOG_LEVEL: "warn",
  };
  return start(process.execPath, [path.join(import.meta.dirname, "serve.mjs")], { env }).exit;
}

onSignal(cleanUp);
let code = 1;
try {
  code = await main();
} catch (error) {
  console.error(error);
}
await end(cleanUp, code);
