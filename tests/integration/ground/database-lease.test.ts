import { spawn } from "node:child_process";
import type { ChildProcess } from "node:child_process";
import { existsSync, readFileSync } from "node:fs";
import path from "node:path";
import { afterEach, describe, expect, it } from "vitest";
import { dataFolder } from "@/scripts/database.mjs";

const root = path.dirname(dataFolder);
/** Longest that a server may take to stop once nobody holds it. */
const limitMs = 30_000;

const children: ChildProcess[] = [];
afterEach(() => children.splice(0).forEach((child) => child.kill("SIGKILL")));

const program = `
  const { openDatabase } = await import(process.argv[1]);
  const database = await openDatabase({ kind: "test" });
  console.log(JSON.stringify({ url: database.url, stop: null }));
  process.on("SIGTERM", async () => { await database.stop(); process.exit(0); });
  setInterval(() => undefined, 1000);`;

/** Starts a process that opens a database of its own, and waits until it has it. */
async function opener(): Promise<{ child: ChildProcess; serverPid: number; folder: string }> {
  const opening = path.join(root, "scripts/database.mjs");
  const env = { ...process.env, DATABASE_URL: "" };
  const child = spawn(process.execPath, ["--input-type=module", "-e", program, opening], { env });
  children.push(child);
  await new Promise((resolve, reject) => {
    child.stdout?.once("data", resolve);
    child.once("exit", (code) => reject(new Error(`ended early with ${code}`)));
  });
  const folder = path.join(dataFolder, `test-${child.pid}`);
  const pidFile = readFileSync(path.join(folder, "cluster/postmaster.pid"), "utf8");
  return { child, folder, serverPid: Number(pidFile.split("\n")[0]) };
}

function runs(pid: number): boolean {
  return existsSync(`/proc/${pid}/cmdline`) && readFileSync(`/proc/${pid}/cmdline`, "utf8").includes("postgres");
}

describe("a database that a command started", () => {
  it.each(["SIGTERM", "SIGKILL"] as const)(
    "stops when its command ends by %s, and leaves nothing behind",
    async (name) => {
      const { child, serverPid, folder } = await opener();
      expect(runs(serverPid)).toBe(true);
      child.kill(name);
      await expect.poll(() => runs(serverPid), { timeout: limitMs }).toBe(false);
      await expect.poll(() => existsSync(folder), { timeout: limitMs }).toBe(false);
    },
    60_000,
  );

  it("is not shared between two commands that test at once", async () => {
    const [first, second] = await Promise.all([opener(), opener()]);
    expect(first.serverPid).not.toBe(second.serverPid);
    first.child.kill("SIGKILL");
    await expect.poll(() => runs(first.serverPid), { timeout: limitMs }).toBe(false);
    expect(runs(second.serverPid)).toBe(true);
  }, 60_000);
});
