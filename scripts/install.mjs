import { accessSync, constants, existsSync, mkdirSync, readFileSync } from "node:fs";
import { homedir } from "node:os";
import path from "node:path";
import { dataFolder } from "./database.mjs";
import { run } from "./processes.mjs";

const root = path.dirname(import.meta.dirname);

/** Node's own version must do; npm reads the same number from package.json. */
export function checkNode() {
  const [major = 0, minor = 0] = process.versions.node.split(".").map(Number);
  if (major > 20 || (major === 20 && minor >= 9)) return;
  throw new Error(`Node.js 20.9 or newer is needed; this is ${process.versions.node}.`);
}

/** Tools write into HOME; where that is not possible they get a folder of ours. */
export function giveHome() {
  if (isWritableFolder(process.env.HOME ?? homedir())) return;
  const home = path.join(dataFolder, "home");
  mkdirSync(home, { recursive: true });
  process.env.HOME = home;
  // The npm that runs this command has handed its own cache on.
  process.env.npm_config_cache = path.join(home, ".npm");
}

function isWritableFolder(folder) {
  try {
    accessSync(folder, constants.W_OK | constants.X_OK);
    return path.isAbsolute(folder);
  } catch {
    return false;
  }
}

/** Whether what is installed is what the lock file says. npm writes its own list at the end of an installation. */
export function isInstalled() {
  const list = path.join(root, "node_modules/.package-lock.json");
  if (!existsSync(list)) return false;
  const wanted = readPackages(path.join(root, "package-lock.json"));
  const found = readPackages(list);
  return Object.entries(wanted).every(([place, entry]) => {
    if (place === "") return true;
    const installed = found[place];
    // An optional package for another system is not installed.
    return installed === undefined ? entry.optional === true : installed.version === entry.version;
  });
}

function readPackages(file) {
  return JSON.parse(readFileSync(file, "utf8")).packages;
}

/** Installs the packages of the lock file unless they stand already. */
export async function installPackages(say) {
  if (isInstalled()) return;
  say("Installing packages (npm ci)", 100);
  const { code, output } = await run("npm", ["ci", "--include=dev", "--no-progress"], {
    cwd: root,
    env: { ...process.env, NODE_ENV: "" },
  });
  if (code !== 0) throw new Error(`npm ci failed:\n${output}`);
}
