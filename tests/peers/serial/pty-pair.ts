import { spawn, type ChildProcess } from "node:child_process";
import { existsSync } from "node:fs";
import path from "node:path";
import { setTimeout as pause } from "node:timers/promises";
import { withFolder } from "./sim-process";

const LOOK_EVERY_MS = 20;
const APPEARS_WITHIN_MS = 10_000;

/** Ends a process that was started here, and waits until it is gone. */
export async function endProcess(child: ChildProcess): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null) return;
  const gone = new Promise((resolve) => child.once("exit", resolve));
  child.kill("SIGTERM");
  await gone;
}

async function appear(links: readonly string[]): Promise<void> {
  for (let waitedMs = 0; waitedMs < APPEARS_WITHIN_MS; waitedMs += LOOK_EVERY_MS) {
    if (links.every((link) => existsSync(link))) return;
    await pause(LOOK_EVERY_MS);
  }
  throw new Error(`socat made no terminals within ${APPEARS_WITHIN_MS} ms`);
}

/** Runs `body` with the names of two pseudo-terminals that are each other's far end. */
export function withPtyPair<T>(body: (near: string, far: string) => Promise<T>): Promise<T> {
  return withFolder(async (folder) => {
    const links = ["near", "far"].map((name) => path.join(folder, name));
    const socat = spawn("socat", links.map((link) => `PTY,link=${link},raw,echo=0`), { stdio: "ignore" });
    try {
      await appear(links);
      return await body(links[0] ?? "", links[1] ?? "");
    } finally {
      await endProcess(socat);
    }
  });
}
