import { spawn } from "node:child_process";
import type { ChildProcessWithoutNullStreams } from "node:child_process";
import { constants, existsSync, lstatSync } from "node:fs";
import { open } from "node:fs/promises";
import path from "node:path";
import { setTimeout as pause } from "node:timers/promises";
import type { Served, ServedDevice } from "./served-device";
import { UNREAD_BYTES } from "./served-device";

const LOOK_EVERY_MS = 20;
const APPEARS_WITHIN_MS = 5000;

/** socat separates options by commas and more, and knows no way to quote all of them. */
const PLAIN_PATH = /^[A-Za-z0-9_./@+ -]+$/u;

/** Puts the device on a pseudo-terminal whose name is `link`, through socat. Throws with what is to be done where it cannot. */
export async function servePty(device: ServedDevice, link: string, onGone: (why: string) => void): Promise<Served> {
  const target = path.resolve(link);
  if (!PLAIN_PATH.test(target))
    throw new Error(`The path ${target} has characters that socat reads as its own. Choose another.`);
  if (lstatSync(target, { throwIfNoEntry: false }))
    throw new Error(`${target} exists already. Remove it or choose another path.`);
  const socat = spawn("socat", ["-", `PTY,link=${target},raw,echo=0`], { stdio: ["pipe", "pipe", "pipe"] });
  const ended = endOf(socat);
  await appears(target, ended);
  // While somebody holds the terminal open, a program that closes it does not hang the line up.
  const hold = await open(target, constants.O_RDWR | constants.O_NOCTTY | constants.O_NONBLOCK);
  let isStopping = false;
  device.onBytes = (bytes) => {
    if (socat.stdin.writableLength < UNREAD_BYTES) socat.stdin.write(bytes);
  };
  // The end of socat says what a failed write would.
  socat.stdin.on("error", () => undefined);
  socat.stdout.on("data", (bytes: Uint8Array) => {
    if (device.wire.hear(bytes)) return;
    socat.stdout.pause();
    device.wire.whenRoom(() => socat.stdout.resume());
  });
  void ended.then((why) => {
    if (!isStopping) onGone(why);
  });
  return {
    where: `pty ${target}`,
    stop: async () => {
      isStopping = true;
      await hold.close();
      socat.kill("SIGTERM");
      await ended;
    },
  };
}

/** Resolves with a sentence when the process has ended or could not be started. */
function endOf(socat: ChildProcessWithoutNullStreams): Promise<string> {
  let complaint = "";
  socat.stderr.on("data", (bytes: Uint8Array) => {
    complaint = (complaint + new TextDecoder().decode(bytes)).slice(-500);
  });
  return new Promise((resolve) => {
    socat.on("error", (error: NodeJS.ErrnoException) => {
      const isMissing = error.code === "ENOENT";
      resolve(
        isMissing
          ? "socat is not installed; on Debian: apt-get install socat"
          : `socat could not be started: ${error.message}`,
      );
    });
    socat.on("close", (code, signal) => resolve(`socat ended (${signal ?? code ?? "?"}). ${complaint}`.trim()));
  });
}

async function appears(target: string, ended: Promise<string>): Promise<void> {
  let why: string | null = null;
  void ended.then((sentence) => (why = sentence));
  for (let waitedMs = 0; waitedMs < APPEARS_WITHIN_MS; waitedMs += LOOK_EVERY_MS) {
    if (existsSync(target)) return;
    if (why !== null) throw new Error(why);
    await pause(LOOK_EVERY_MS);
  }
  throw new Error(`socat made no terminal at ${target} within ${APPEARS_WITHIN_MS} ms.`);
}
