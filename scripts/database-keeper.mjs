/**
 * Keeps one PostgreSQL cluster running while somebody holds a lease on it, and stops it when the last holder is gone,
 * also when that one was killed. Started by `database.mjs`, which hands it a folder; it outlives its starter.
 *
 * Leases are files with the holder's process number and start time, so a dead holder needs to do nothing.
 */
import { spawn } from "node:child_process";
import { existsSync, mkdirSync, openSync, readFileSync, readdirSync, renameSync, rmSync, writeFileSync } from "node:fs";
import { createServer, connect } from "node:net";
import path from "node:path";
import { withLock } from "./lock.mjs";
import { isAlive, thisProcess, waitUntil } from "./processes.mjs";

const { folder, command, ephemeral } = JSON.parse(process.argv[2] ?? "{}");
const stateFile = path.join(folder, "keeper.json");
const leases = path.join(folder, "leases");

/** How often the leases are looked at. */
const lookMs = 300;
const portTries = 5;
const startLimitMs = 60_000;
/** A fast shutdown writes a checkpoint; after this long it is ended without one, which the next start repairs. */
const stopLimitMs = 20_000;

function freePort() {
  return new Promise((resolve, reject) => {
    const server = createServer();
    server.on("error", reject);
    server.listen(0, "127.0.0.1", () => {
      const { port } = server.address();
      server.close(() => resolve(port));
    });
  });
}

function answers(port) {
  return new Promise((resolve) => {
    const socket = connect({ port, host: "127.0.0.1" });
    socket.on("connect", () => {
      socket.destroy();
      resolve(true);
    });
    socket.on("error", () => resolve(false));
  });
}

/** Starts the server on a free port; another program may take the port in between, so a few are tried. */
async function startServer() {
  const log = openSync(path.join(folder, "postgres.log"), "a");
  for (let attempt = 0; attempt < portTries; attempt += 1) {
    const port = await freePort();
    const [program, ...args] = [...command, "-p", String(port)];
    const server = spawn(program, args, { cwd: "/", stdio: ["ignore", log, log], detached: true });
    let gone = false;
    for (const event of ["exit", "error"]) server.on(event, () => (gone = true));
    const ready = await waitUntil(async () => gone || (await answers(port)), startLimitMs);
    if (ready && !gone) return { server, port };
    if (!gone) process.kill(server.pid, "SIGQUIT");
  }
  return null;
}

function writeState(state) {
  writeFileSync(`${stateFile}.part`, JSON.stringify(state), { mode: 0o600 });
  renameSync(`${stateFile}.part`, stateFile);
}

/** Whether anybody alive holds a lease. Leases of the dead are removed. */
function isHeld() {
  let held = false;
  for (const name of readdirSync(leases)) {
    const file = path.join(leases, name);
    if (isAlive(JSON.parse(readFileSync(file, "utf8")))) held = true;
    else rmSync(file, { force: true });
  }
  return held;
}

async function stopServer(server) {
  server.kill("SIGINT");
  const gone = () => server.exitCode !== null || server.signalCode !== null;
  if (await waitUntil(gone, stopLimitMs)) return;
  server.kill("SIGQUIT");
  await waitUntil(gone, stopLimitMs);
}

async function main() {
  mkdirSync(leases, { recursive: true });
  const started = await startServer();
  if (started === null) {
    writeState({ keeper: thisProcess(), failed: true });
    return;
  }
  const { server, port } = started;
  writeState({ keeper: thisProcess(), port });
  let over = false;
  server.on("exit", () => (over = true));
  // Ends with the last lease, or with the server.
  while (!over) {
    await new Promise((resolve) => setTimeout(resolve, lookMs));
    if (over || isHeld()) continue;
    // Under the lock nobody can take a lease between the last look and the stop.
    over = await withLock(`${folder}.lock`, async () => {
      if (isHeld()) return false;
      await stopServer(server);
      rmSync(stateFile, { force: true });
      return true;
    });
  }
  if (existsSync(stateFile)) rmSync(stateFile, { force: true });
  if (ephemeral) rmSync(folder, { recursive: true, force: true });
}

// The terminal's Ctrl-C and a polite kill go to the holders: when they are gone, this ends by itself.
for (const name of ["SIGINT", "SIGHUP", "SIGTERM"]) process.on(name, () => undefined);
await main();
