import { describe, expect, test } from "vitest";
import { createVirtualClock } from "@/lib/serial/clock/virtual-clock";
import { createDeviceModel } from "@/lib/serial/simulator/device-model";
import { takeBackup } from "@/lib/serial/backup/take-backup";
import { compiled, withSession } from "./live-session";
import { connectSerial, connectTcp } from "./open-duplex";
import { withPty, withTcp } from "./sim-process";

const driver = compiled("lanternfield-lf8");
/** What a new device holds, from a device of our own that no byte stream lies before. */
const asNew = createDeviceModel(driver, { clock: createVirtualClock() }).working;

describe("the session code over real byte streams", () => {
  test("backs a device up over a pseudo-terminal through the package serialport", async () => {
    await withPty("lanternfield-lf8", (terminal) =>
      withSession(
        driver,
        (options) => connectSerial(terminal, options),
        async ({ session, identity }) => {
          expect(identity).toMatchObject({ maker: "Lanternfield", model: "LF-8" });
          const backup = await takeBackup(session, driver);
          if (!backup.ok) throw new Error(backup.error.message);
          expect(backup.value.content.values).toEqual(asNew);
          expect(backup.value.content.unreadable).toEqual([]);
        },
      ),
    );
  });

  test("backs a device up over TCP, and the device keeps its state from one connection to the next", async () => {
    const key = "slots[1].placement.offsetPx";
    await withTcp(
      "lanternfield-lf8",
      async (port) => {
        const connect = () => connectTcp("127.0.0.1", port);
        await withSession(driver, connect, async ({ session }) => {
          const backup = await takeBackup(session, driver);
          if (!backup.ok) throw new Error(backup.error.message);
          expect(backup.value.content.values).toEqual(asNew);
          expect(await session.write([{ key, value: 7 }])).toEqual({ ok: true, value: { outcome: "acknowledged" } });
        });
        await withSession(driver, connect, async ({ session }) => {
          expect(await session.read([key])).toEqual({ ok: true, value: { [key]: 7 } });
        });
      },
      "--baud",
      "none",
    );
  });

  test("reports the device lost when the stream ends in the middle of a backup", async () => {
    await withTcp("lanternfield-lf8", (port, sim) =>
      withSession(
        driver,
        () => connectTcp("127.0.0.1", port),
        async ({ session }) => {
          let stopping: Promise<unknown> | null = null;
          const backup = await takeBackup(session, driver, { onProgress: () => void (stopping ??= sim.stop()) });
          expect(backup).toMatchObject({ ok: false, error: { code: "lost" } });
          expect(session.state.name).toBe("lost");
          await stopping;
        },
      ),
    );
  });
});
