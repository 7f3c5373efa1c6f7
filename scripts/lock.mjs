import { linkSync, readFileSync, renameSync, rmSync, writeFileSync } from "node:fs";
import { isAlive, thisProcess, waitUntil } from "./processes.mjs";

/** Longest that one holder may take: making a cluster on a slow disk. */
const patienceMs = 120_000;

/** Runs `act` while holding the lock `file`. A lock whose holder is gone is taken over. Throws after two minutes. */
export async function withLock(file, act) {
  if (!(await waitUntil(() => tryLock(file), patienceMs))) throw new Error(`Another command holds ${file}.`);
  try {
    return await act();
  } finally {
    rmSync(file, { force: true });
  }
}

function tryLock(file) {
  const mine = `${file}.${process.pid}`;
  writeFileSync(mine, JSON.stringify(thisProcess()));
  try {
    // A link appears whole or not at all, so nobody ever reads half a holder.
    linkSync(mine, file);
    return true;
  } catch (error) {
    if (error.code !== "EEXIST") throw error;
    dropIfOrphaned(file, mine);
    return false;
  } finally {
    rmSync(mine, { force: true });
  }
}

function dropIfOrphaned(file, mine) {
  const holder = readHolder(file);
  if (holder === null || isAlive(holder)) return;
  // Moving is atomic: of several that saw the orphan one moves it, and puts it back if it was a newer lock.
  const moved = `${mine}.orphan`;
  try {
    renameSync(file, moved);
  } catch (error) {
    if (error.code === "ENOENT") return;
    throw error;
  }
  const taken = readHolder(moved);
  if (taken !== null && isAlive(taken)) linkSync(moved, file);
  rmSync(moved, { force: true });
}

function readHolder(file) {
  try {
    return JSON.parse(readFileSync(file, "utf8"));
  } catch (error) {
    if (error.code === "ENOENT" || error instanceof SyntaxError) return null;
    throw error;
  }
}
