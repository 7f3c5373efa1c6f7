import { spawn } from "node:child_process";
import { once } from "node:events";
import { readFileSync } from "node:fs";
import path from "node:path";

/**
 * A process, told apart from a later one with the same number by when it started.
 * @typedef {{ pid: number, startedAt: string }} ProcessId
 */

/** Start time of a process in clock ticks since boot, null when it is gone. Source: proc(5), /proc/pid/stat field 22. */
export function startTimeOf(pid) {
  let stat;
  try {
    stat = readFileSync(`/proc/${pid}/stat`, "utf8");
  } catch {
    return null;
  }
  // The second field is the name in brackets and may hold spaces and brackets itself.
  const fields = stat.slice(stat.lastIndexOf(")") + 2).split(" ");
  return fields[0] === "Z" ? null : (fields[19] ?? null);
}

/** @returns {ProcessId} this process */
export function thisProcess() {
  return { pid: process.pid, startedAt: startTimeOf(process.pid) ?? "" };
}

/** @param {ProcessId} id */
export function isAlive({ pid, startedAt }) {
  return startTimeOf(pid) === startedAt;
}

/** Sends a signal to a process if it is still the same one. */
export function signal(id, name) {
  if (!isAlive(id)) return;
  try {
    process.kill(id.pid, name);
  } catch (error) {
    if (error.code !== "ESRCH") throw error;
  }
}

/** Waits in steps of 50 ms until `done()` is true, at most `limitMs`. Returns whether it became true. */
export async function waitUntil(done, limitMs) {
  for (let waitedMs = 0; waitedMs <= limitMs; waitedMs += 50) {
    if (await done()) return true;
    await new Promise((resolve) => setTimeout(resolve, 50));
  }
  return false;
}

const running = new Set();

/**
 * Starts a command that cannot outlive this process: `guard.mjs` stands between and ends the command's whole process
 * group when this process goes, however it goes.
 *
 * @param {string} command
 * @param {readonly string[]} args
 * @param {{ cwd?: string, env?: NodeJS.ProcessEnv, output?: "inherit" | "pipe" }} options
 * @returns {{ output: () => string, exit: Promise<number>, stop: () => Promise<void>, child: import("node:child_process").ChildProcess }}
 */
export function start(command, args, { cwd, env = process.env, output = "inherit" } = {}) {
  const stream = output === "inherit" ? "inherit" : "pipe";
  const guard = path.join(import.meta.dirname, "guard.mjs");
  const child = spawn(process.execPath, [guard, command, ...args], {
    cwd,
    env,
    stdio: ["ignore", stream, stream, "ipc"],
    // In its own group, so that a Ctrl-C reaches this process alone, which then stops things in their order.
    detached: true,
  });
  const chunks = [];
  for (const source of [child.stdout, child.stderr]) source?.on("data", (chunk) => keep(chunks, chunk));
  // Not "close": it never comes when the channel was closed from this side.
  const ended = [child.stdout, child.stderr].map((source) => (source ? once(source, "close") : Promise.resolve()));
  const exit = new Promise((resolve) => {
    child.on("error", () => resolve(127));
    child.on("exit", (code) => void Promise.all(ended).then(() => resolve(code ?? 1)));
  });
  const stop = async () => {
    if (child.connected) child.disconnect();
    await exit;
  };
  const handle = { child, exit, stop, output: () => Buffer.concat(chunks).toString("utf8") };
  running.add(handle);
  void exit.then(() => running.delete(handle));
  return handle;
}

/** At most this much of a command's output is kept: the end of it. */
const keptBytes = 4 * 1024 * 1024;

function keep(chunks, chunk) {
  chunks.push(chunk);
  let length = chunks.reduce((sum, one) => sum + one.length, 0);
  while (length > keptBytes && chunks.length > 1) length -= chunks.shift().length;
}

/** Runs a command to its end, or stops it after `limitMs`. Returns its exit code and what it wrote. */
export async function run(command, args, { limitMs, ...options } = {}) {
  const handle = start(command, args, { output: "pipe", ...options });
  let late = false;
  const timer = setTimeout(() => void ((late = true), handle.stop()), limitMs ?? defaultLimitMs);
  const code = await handle.exit;
  clearTimeout(timer);
  return late
    ? { code: 124, output: `${handle.output()}\nStopped: it took longer than allowed.\n` }
    : { code, output: handle.output() };
}

/** Longer than any of our commands takes on a slow machine; a command that hangs ends all the same. */
const defaultLimitMs = 15 * 60_000;

/** Stops every command that is still running. */
export async function stopAll() {
  await Promise.all([...running].map((handle) => handle.stop()));
}

let ending = false;

/**
 * Runs `clean` once when the process is told to end (Ctrl-C, SIGTERM, SIGHUP), then ends with the signal's code.
 * A second signal changes nothing: cleaning has bounds of its own.
 */
export function onSignal(clean) {
  for (const [name, number] of [
    ["SIGINT", 2],
    ["SIGTERM", 15],
    ["SIGHUP", 1],
  ]) {
    process.on(name, () => void end(clean, 128 + number));
  }
}

/** Runs `clean` and ends with `code`, unless a signal has begun to end the process already. */
export async function end(clean, code) {
  if (ending) return;
  ending = true;
  try {
    await clean();
  } finally {
    process.exit(code);
  }
}
