import { existsSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import path from "node:path";
import { describe, expect, test } from "vitest";
import { readArguments } from "@/scripts/sim/arguments";
import { parseAddress } from "@/scripts/sim/serve-tcp";
import { connectTcp } from "./open-duplex";
import { startSim, withFolder, withPty, withTcp } from "./sim-process";

/** The numbers of the socat processes that serve this terminal. Source: proc(5), /proc/pid/cmdline. */
function socatsAt(terminal: string): string[] {
  return readdirSync("/proc").filter((name) => {
    if (!/^\d+$/u.test(name) || !existsSync(`/proc/${name}/cmdline`)) return false;
    const command = readFileSync(`/proc/${name}/cmdline`, "utf8");
    return command.startsWith("socat") && command.includes(terminal);
  });
}

describe("npm run sim", () => {
  test("ends cleanly on SIGINT and SIGTERM, and takes its terminal and its socat along", async () => {
    for (const signal of ["SIGINT", "SIGTERM"] as const) {
      await withPty("lanternfield-lf8", async (terminal, sim) => {
        expect(sim.line).toBe(`lanternfield-lf8 listens at pty ${terminal}`);
        expect(socatsAt(terminal)).toHaveLength(1);
        expect(await sim.stop(signal)).toBe(0);
        expect(existsSync(terminal)).toBe(false);
        expect(socatsAt(terminal)).toEqual([]);
      });
    }
  });

  test("says what is missing where there is no socat", async () => {
    await withFolder(async (folder) => {
      const start = startSim(["--driver", "lanternfield-lf8", "--pty", path.join(folder, "tty")], {
        ...process.env,
        PATH: folder,
      });
      await expect(start).rejects.toThrow("socat is not installed; on Debian: apt-get install socat");
    });
  });

  test("does not take the place of a file that is there", async () => {
    await withFolder(async (folder) => {
      const taken = path.join(folder, "taken");
      writeFileSync(taken, "");
      await expect(startSim(["--driver", "lanternfield-lf8", "--pty", taken])).rejects.toThrow("exists already");
    });
  });

  test("explains itself when it is misused", async () => {
    const wrong: [string[], string][] = [
      [[], "Say which device"],
      [["--driver", "none-such", "--tcp", "127.0.0.1:0"], "No driver is called none-such"],
      [["--driver", "lanternfield-lf8"], "Say where"],
      [["--driver", "lanternfield-lf8", "--tcp", "127.0.0.1:0", "--pty", "x"], "Say where"],
      [["--driver", "lanternfield-lf8", "--tcp", "nowhere"], "nowhere is not HOST:PORT"],
      [["--driver", "lanternfield-lf8", "--tcp", "here:65536"], "here:65536 is not HOST:PORT"],
      [["--driver", "lanternfield-lf8", "--tcp", "127.0.0.1:0", "--baud", "fast"], "--baud is real or none"],
      [["--loud"], "Unknown option '--loud'"],
    ];
    for (const [args, message] of wrong) {
      const read = readArguments(args);
      expect(read.ok ? "" : read.error).toContain(message);
    }
    await expect(startSim([])).rejects.toThrow(/ended with 2: Say which device.*--driver {2}lanternfield-lf8/su);
  });

  test("takes names, IPv4 and bracketed IPv6 addresses", () => {
    expect(parseAddress("localhost:5502")).toEqual({ host: "localhost", port: 5502 });
    expect(parseAddress("127.0.0.1:0")).toEqual({ host: "127.0.0.1", port: 0 });
    expect(parseAddress("[::1]:80")).toEqual({ host: "::1", port: 80 });
    expect(parseAddress("::1:80")).toBeNull();
  });

  test("has one host at a time, as a line has: the last who connected", async () => {
    await withTcp("lanternfield-lf8", async (port) => {
      const first = await connectTcp("127.0.0.1", port);
      const firstIsOver = new Promise<void>((resolve) => first.on("close", () => resolve()));
      const second = await connectTcp("127.0.0.1", port);
      await firstIsOver;
      const answer = new Promise<string>((resolve) =>
        second.on("data", (bytes) => resolve(new TextDecoder().decode(bytes))),
      );
      second.write(new TextEncoder().encode("*OPC?\n"), () => undefined);
      expect(await answer).toContain("1");
      second.destroy();
    });
  });
});
