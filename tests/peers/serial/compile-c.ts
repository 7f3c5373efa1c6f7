import { execFile } from "node:child_process";
import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";
import { promisify } from "node:util";

const run = promisify(execFile);

/** Compiles `c/<name>.c` with the system's compiler against libmodbus, runs `body` with the program's path, and removes it. */
export async function withProgram<T>(name: string, body: (program: string) => Promise<T>): Promise<T> {
  const folder = await mkdtemp(path.join(tmpdir(), "backporch-peer-"));
  try {
    const { stdout } = await run("pkg-config", ["--cflags", "--libs", "libmodbus"]);
    const program = path.join(folder, name);
    const source = path.join(import.meta.dirname, "c", `${name}.c`);
    await run("gcc", ["-std=gnu11", "-O2", "-Wall", "-Wextra", "-Werror", source, "-o", program, ...stdout.trim().split(/\s+/u)]);
    return await body(program);
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}
