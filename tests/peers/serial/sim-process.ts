import { spawn } from "node:child_process";
import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";

export type SimProcess = {
  /** The line that it printed when it was ready. */
  readonly line: string;
  readonly pid: number;
  /** Ends it by its id. @returns its exit code */
  readonly stop: (signal?: "SIGINT" | "SIGTERM") => Promise<number | null>;
};

const root = path.resolve(import.meta.dirname, "../../..");

/** Starts `scripts/sim.ts` and waits for its line. Rejects with what it said where it ends before. */
export function startSim(args: readonly string[], env: NodeJS.ProcessEnv = process.env): Promise<SimProcess> {
  const child = spawn(process.execPath, ["--import", "tsx", path.join(root, "scripts/sim.ts"), ...args], {
    cwd: root,
    env,
    stdio: ["ignore", "pipe", "pipe"],
  });
  const ended = new Promise<number | null>((resolve) => child.once("close", (code) => resolve(code)));
  return new Promise((resolve, reject) => {
    let said = "";
    child.stderr.on("data", (bytes: Buffer) => (said += bytes.toString()));
    child.stdout.on("data", (bytes: Buffer) => {
      said += bytes.toString();
      const line = said.split("\n").find((each) => each.includes(" listens at "));
      if (line === undefined) return;
      const stop = async (signal: "SIGINT" | "SIGTERM" = "SIGTERM"): Promise<number | null> => {
        child.kill(signal);
        return ended;
      };
      resolve({ line, pid: child.pid ?? 0, stop });
    });
    void ended.then((code) => reject(new Error(`The simulated device ended with ${code}: ${said}`)));
  });
}

/** A folder of its own for a pseudo-terminal's name. */
export async function withFolder<T>(body: (folder: string) => Promise<T>): Promise<T> {
  const folder = await mkdtemp(path.join(tmpdir(), "backporch-sim-"));
  try {
    return await body(folder);
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}

/** Runs `body` with a simulated device on a pseudo-terminal. */
export function withPty<T>(
  driver: string,
  body: (terminal: string, sim: SimProcess) => Promise<T>,
  ...more: string[]
): Promise<T> {
  return withFolder(async (folder) => {
    const terminal = path.join(folder, "tty");
    const sim = await startSim(["--driver", driver, "--pty", terminal, ...more]);
    try {
      return await body(terminal, sim);
    } finally {
      await sim.stop();
    }
  });
}

/** Runs `body` with a simulated device on a free TCP port of the loopback. */
export async function withTcp<T>(
  driver: string,
  body: (port: number, sim: SimProcess) => Promise<T>,
  ...more: string[]
): Promise<T> {
  const sim = await startSim(["--driver", driver, "--tcp", "127.0.0.1:0", ...more]);
  try {
    return await body(Number(sim.line.split(":").at(-1)), sim);
  } finally {
    await sim.stop();
  }
}
