/**
 * Stands between a command and the process that started it. When that process goes (its IPC channel closes, also
 * after a kill -9), the command's process group is ended: asked first, after five seconds by force.
 */
import { spawn } from "node:child_process";

const patienceMs = 5000;
const [command = "", ...args] = process.argv.slice(2);

const child = spawn(command, args, { stdio: ["ignore", "inherit", "inherit"], detached: true });

function signalGroup(name) {
  if (child.pid === undefined) return;
  try {
    process.kill(-child.pid, name);
  } catch (error) {
    if (error.code !== "ESRCH") throw error;
  }
}

let ending = false;
function end() {
  if (ending) return;
  ending = true;
  signalGroup("SIGTERM");
  setTimeout(() => signalGroup("SIGKILL"), patienceMs);
}

process.on("disconnect", end);
for (const name of ["SIGINT", "SIGTERM", "SIGHUP"]) process.on(name, end);

child.on("error", (error) => {
  process.stderr.write(`${command}: ${error.message}\n`);
  process.exit(127);
});
child.on("exit", (code, signalName) => {
  // What the command started and left behind goes with it.
  signalGroup("SIGKILL");
  process.exit(code ?? (signalName === null ? 1 : 143));
});
if (!process.connected) end();
