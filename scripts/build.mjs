import { createHash } from "node:crypto";
import { existsSync, mkdirSync, readFileSync, readdirSync, rmSync, statSync, writeFileSync } from "node:fs";
import path from "node:path";
import { dataFolder } from "./database.mjs";
import { withLock } from "./lock.mjs";
import { isAlive, run, thisProcess } from "./processes.mjs";

const root = path.dirname(import.meta.dirname);

/** All that a build is made from. */
const sources = [
  "app",
  "components",
  "lib",
  "db",
  "public",
  "auth.ts",
  "proxy.ts",
  "instrumentation.ts",
  "next.config.mjs",
  "postcss.config.mjs",
  "tailwind.config.ts",
  "tsconfig.json",
  "tsconfig.next.json",
  "package-lock.json",
];

/** Two places, so that a build for tests never pulls the files from under a server that is running. */
const places = [".next", ".next-test"];

function* filesUnder(entry) {
  const stats = statSync(entry, { throwIfNoEntry: false });
  if (stats === undefined) return;
  if (stats.isFile()) yield entry;
  else for (const name of readdirSync(entry).sort()) yield* filesUnder(path.join(entry, name));
}

function sourceHash() {
  const hash = createHash("sha256").update(process.version);
  for (const entry of sources) {
    for (const file of filesUnder(path.join(root, entry))) {
      hash.update(`\0${path.relative(root, file)}\0`).update(readFileSync(file));
    }
  }
  return hash.digest("hex");
}

const stampOf = (place) => path.join(root, place, "source-hash");
const leasesOf = (place) => path.join(dataFolder, "builds", place);

function isCurrent(place, hash) {
  return existsSync(stampOf(place)) && readFileSync(stampOf(place), "utf8") === hash;
}

/** Whether another command that is alive serves from this place. */
function isInUse(place) {
  if (!existsSync(leasesOf(place))) return false;
  return readdirSync(leasesOf(place)).some((name) => {
    const file = path.join(leasesOf(place), name);
    const holder = JSON.parse(readFileSync(file, "utf8"));
    if (!isAlive(holder)) rmSync(file, { force: true });
    return isAlive(holder) && holder.pid !== process.pid;
  });
}

/**
 * Makes a production build unless one of these very sources stands, and keeps it from being replaced while this
 * process lives. Returns its folder, for BUILD_DIR. Throws with the build's output when it fails.
 */
export async function ensureBuild(say) {
  mkdirSync(path.join(dataFolder, "builds"), { recursive: true });
  return withLock(path.join(dataFolder, "build.lock"), async () => {
    const hash = sourceHash();
    const place = places.find((each) => isCurrent(each, hash)) ?? places.find((each) => !isInUse(each));
    if (place === undefined) throw new Error("Two servers run on older builds of this folder. Stop one of them first.");
    if (!isCurrent(place, hash)) await build(place, hash, say);
    mkdirSync(leasesOf(place), { recursive: true });
    writeFileSync(path.join(leasesOf(place), `${process.pid}.json`), JSON.stringify(thisProcess()));
    return place;
  });
}

async function build(place, hash, say) {
  say("Building the pages", 60);
  rmSync(stampOf(place), { force: true });
  const next = path.join(root, "node_modules/next/dist/bin/next");
  const { code, output } = await run(process.execPath, [next, "build"], {
    cwd: root,
    env: { ...process.env, BUILD_DIR: place, NODE_ENV: "production", NEXT_TELEMETRY_DISABLED: "1" },
  });
  if (code !== 0) throw new Error(`The build failed:\n${output}`);
  writeFileSync(stampOf(place), hash);
}
