import { execFile } from "node:child_process";
import { mkdtemp, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";

/** Output of a program, whatever its exit code: edid-decode exits 1 where an EDID has faults. */
function run(program: string, args: readonly string[]): Promise<string> {
  return new Promise((resolve, reject) => {
    execFile(program, [...args], { timeout: 30_000, maxBuffer: 1 << 26 }, (error, stdout) => {
      if (error !== null && stdout === "") reject(error);
      else resolve(stdout);
    });
  });
}

/** Runs a program of Debian on a file of the given content. `args` names it "@". */
export async function runOnFile(
  program: string,
  args: readonly string[],
  content: string | Uint8Array,
): Promise<string> {
  const folder = await mkdtemp(path.join(tmpdir(), "backporch-peer-"));
  try {
    const file = path.join(folder, "input");
    await writeFile(file, content);
    return await run(
      program,
      args.map((arg) => (arg === "@" ? file : arg)),
    );
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}

/** Runs a program of Debian that needs no file. */
export const runPeer = run;
