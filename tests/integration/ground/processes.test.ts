import { spawn } from "node:child_process";
import { once } from "node:events";
import { mkdtempSync, readFileSync, rmSync, writeFileSync, existsSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterEach, describe, expect, it } from "vitest";
import { dataFolder } from "@/scripts/database.mjs";
import { isAlive, startTimeOf, thisProcess } from "@/scripts/processes.mjs";
import { withLock } from "@/scripts/lock.mjs";

const scripts = path.join(path.dirname(dataFolder), "scripts");
/** Longest that a guarded command may outlive its starter. */
const limitMs = 20_000;

const folders: string[] = [];
function folder(): string {
  const made = mkdtempSync(path.join(tmpdir(), "processes with spaces "));
  folders.push(made);
  return made;
}
afterEach(() => folders.splice(0).forEach((each) => rmSync(each, { recursive: true, force: true })));

/** A process that starts a command which starts another and ignores polite signals; both write their numbers. */
function starter(where: string) {
  const stubborn = `trap "" TERM INT; sleep 300 & echo $! > grandchild; echo $$ > child; wait; wait`;
  const program = `
    const { start } = await import(${JSON.stringify(path.join(scripts, "processes.mjs"))});
    start("sh", ["-c", ${JSON.stringify(stubborn)}], { cwd: ${JSON.stringify(where)} });
    setInterval(() => undefined, 1000);`;
  return spawn(process.execPath, ["--input-type=module", "-e", program], { stdio: "ignore" });
}

describe("a command that was started", () => {
  it.each(["SIGKILL", "SIGTERM"] as const)(
    "ends with all it started when its starter goes by %s",
    async (signal) => {
      const where = folder();
      const process = starter(where);
      const pidIn = (name: string) => Number(readFileSync(path.join(where, name), "utf8"));
      await expect.poll(() => existsSync(path.join(where, "child")), { timeout: limitMs }).toBe(true);
      const pids = [pidIn("child"), pidIn("grandchild")];
      expect(pids.map((pid) => startTimeOf(pid) !== null)).toEqual([true, true]);
      process.kill(signal);
      await expect.poll(() => pids.map((pid) => startTimeOf(pid)), { timeout: limitMs }).toEqual([null, null]);
    },
    60_000,
  );
});

describe("a command that is told to stop", () => {
  it("is over, and what it wrote is whole, when its starter goes on", async () => {
    const program = `
      const { start, stopAll, onSignal } = await import(${JSON.stringify(path.join(scripts, "processes.mjs"))});
      const command = start("sh", ["-c", "echo begun; sleep 300"], { output: "pipe" });
      onSignal(async () => { await stopAll(); console.log("said " + command.output().trim()); });
      command.child.stdout.once("data", () => process.kill(process.pid, "SIGINT"));
      await command.exit;`;
    const child = spawn(process.execPath, ["--input-type=module", "-e", program]);
    const chunks: Buffer[] = [];
    child.stdout.on("data", (chunk: Buffer) => chunks.push(chunk));
    const [code] = (await once(child, "close")) as [number];
    // 128 + 2: ended by SIGINT, as a shell says it.
    expect([code, Buffer.concat(chunks).toString()]).toEqual([130, "said begun\n"]);
  }, 60_000);
});

describe("a process", () => {
  it("is told apart from a later one with its number", () => {
    expect(isAlive(thisProcess())).toBe(true);
    expect(isAlive({ pid: process.pid, startedAt: "1" })).toBe(false);
  });
});

describe("a lock", () => {
  it("lets one in at a time", async () => {
    const file = path.join(folder(), "lock");
    let inside = 0;
    let most = 0;
    const act = async () => {
      inside += 1;
      most = Math.max(most, inside);
      await new Promise((resolve) => setImmediate(resolve));
      inside -= 1;
    };
    await Promise.all(Array.from({ length: 5 }, () => withLock(file, act)));
    expect([most, existsSync(file)]).toEqual([1, false]);
  });

  it("is taken over when its holder is gone", async () => {
    const file = path.join(folder(), "lock");
    writeFileSync(file, JSON.stringify({ pid: process.pid, startedAt: "1" }));
    expect(await withLock(file, async () => "in")).toBe("in");
  });
});
