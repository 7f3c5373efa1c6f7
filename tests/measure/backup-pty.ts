import { takeBackup } from "@/lib/serial/backup/take-backup";
import { wireLimitMs } from "@/lib/serial/driver/costs";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { DeviceSession } from "@/lib/serial/session/types";
import { compiled, withSession } from "@/tests/peers/serial/live-session";
import { connectSerial } from "@/tests/peers/serial/open-duplex";
import { withPty } from "@/tests/peers/serial/sim-process";
import type { Measurement } from "./measure";

/** A machine that is busy with something else for a moment says nothing of the code: the best of these counts. */
const ATTEMPTS = 6;

/** From the first setting's request to the last setting's reply. @returns ms */
export async function timeOfSettings(session: DeviceSession, driver: CompiledDriver): Promise<number> {
  let startMs = NaN;
  let endMs = NaN;
  const backup = await takeBackup(session, driver, {
    onProgress: ({ done, total }) => {
      if (done === 0) startMs = performance.now();
      if (done === total) endMs = performance.now();
    },
  });
  if (!backup.ok) throw new Error(backup.error.message);
  return endMs - startMs;
}

/** Backup of an LF-8 over a pseudo-terminal in real time, against the least time that its line allows. */
export async function measureBackupOverPty(): Promise<readonly Measurement[]> {
  const driver = compiled("lanternfield-lf8");
  const times = await withPty("lanternfield-lf8", (terminal) =>
    withSession(
      driver,
      (options) => connectSerial(terminal, options),
      async ({ session }) => {
        const taken: number[] = [];
        for (let attempt = 0; attempt < ATTEMPTS; attempt += 1) taken.push(await timeOfSettings(session, driver));
        return taken;
      },
    ),
  );
  const limit = 1.1 * wireLimitMs(driver);
  return [{ name: "LF-8 backup over a pseudo-terminal, real time", value: Math.min(...times), unit: "ms", limit }];
}
