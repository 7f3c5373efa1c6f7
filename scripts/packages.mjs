import { accessSync, constants, existsSync, readdirSync } from "node:fs";
import path from "node:path";
import { run } from "./processes.mjs";

/** True when one of `names` can be run from the path. */
function onPath(...names) {
  const folders = [...(process.env.PATH ?? "").split(path.delimiter), "/usr/bin", "/usr/sbin"];
  return names.some((name) => folders.some((folder) => folder !== "" && isExecutable(path.join(folder, name))));
}

function isExecutable(file) {
  try {
    accessSync(file, constants.X_OK);
    return true;
  } catch {
    return false;
  }
}

const pythonModule = (name) => existsSync(`/usr/lib/python3/dist-packages/${name}`);

/** Folder of PostgreSQL's programs, the newest of version 15 and up; null when it is not installed. */
export function postgresBin() {
  const base = "/usr/lib/postgresql";
  const versions = existsSync(base)
    ? readdirSync(base)
        .map(Number)
        .filter((version) => version >= 15)
    : [];
  const newest = versions.sort((a, b) => b - a).find((version) => isExecutable(`${base}/${version}/bin/initdb`));
  return newest === undefined ? null : `${base}/${newest}/bin`;
}

/** What the commands need from Debian, and how to see that it is there. */
const packages = {
  postgresql: { debian: "postgresql-15", present: () => postgresBin() !== null },
  chromium: {
    // Without a window of its own: it starts faster, and a page in it costs less.
    debian: "chromium-headless-shell",
    present: () => process.env.CHROMIUM_PATH !== undefined || isExecutable("/usr/bin/chromium-headless-shell"),
  },
  socat: { debian: "socat", present: () => onPath("socat") },
  edidDecode: { debian: "edid-decode", present: () => onPath("edid-decode") },
  mbpoll: { debian: "mbpoll", present: () => onPath("mbpoll") },
  libmodbus: { debian: "libmodbus-dev", present: () => existsSync("/usr/include/modbus/modbus.h") },
  pkgConfig: { debian: "pkg-config", present: () => onPath("pkg-config") },
  compiler: { debian: "gcc libc6-dev", present: () => onPath("gcc") && existsSync("/usr/include/stdio.h") },
  pyvisa: {
    debian: "python3-pyvisa python3-pyvisa-py",
    present: () => pythonModule("pyvisa") && pythonModule("pyvisa_py"),
  },
  pyserial: { debian: "python3-serial", present: () => pythonModule("serial") },
  ngspice: { debian: "ngspice", present: () => onPath("ngspice") },
};

/** Something that the person at the keyboard has to do first: shown without a stack. */
export class Prerequisite extends Error {}

/**
 * Installs what is missing of `names` with apt-get, as root or through a sudo that asks nothing.
 * Throws Prerequisite with the one line to run where there is no right to install.
 */
export async function ensurePackages(names, say) {
  const missing = names.filter((name) => !packages[name].present());
  if (missing.length === 0) return;
  const debian = missing.flatMap((name) => packages[name].debian.split(" "));
  const line = `apt-get update && apt-get install -y --no-install-recommends ${debian.join(" ")}`;
  const prefix = await installPrefix();
  if (prefix === null) {
    throw new Prerequisite(
      `Some programs are missing and cannot be installed from here. Run this first:\n  sudo sh -c '${line}'`,
    );
  }
  say(`Installing ${debian.join(", ")} from Debian`, 20 + 10 * debian.length);
  const result = await run(
    ...asCommand([...prefix, "sh", "-c", `${noClusterOfDebian} && ${line} -o Dpkg::Options::=--force-confold`]),
    {
      env: { ...process.env, DEBIAN_FRONTEND: "noninteractive" },
    },
  );
  const still = missing.filter((name) => !packages[name].present());
  if (still.length > 0) {
    throw new Prerequisite(`${result.output}\nThe installation failed. Run this by hand:\n  sudo sh -c '${line}'`);
  }
}

/**
 * Debian's package would make and start a server for the whole machine. The project runs one of its own, so that one
 * is left out unless the machine's owner has settled it already.
 */
const noClusterOfDebian = [
  "mkdir -p /etc/postgresql-common",
  "{ test -e /etc/postgresql-common/createcluster.conf || echo 'create_main_cluster = false' > /etc/postgresql-common/createcluster.conf; }",
].join(" && ");

function asCommand([command, ...args]) {
  return [command, args];
}

/** What stands before apt-get: nothing for root, a sudo that does not ask, or null without either. */
async function installPrefix() {
  if (!onPath("apt-get")) return null;
  if (process.getuid() === 0) return [];
  if (!onPath("sudo")) return null;
  const { code } = await run("sudo", ["-n", "true"]);
  return code === 0 ? ["sudo", "-n", "--preserve-env=DEBIAN_FRONTEND"] : null;
}
