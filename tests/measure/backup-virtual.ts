import { takeBackup } from "@/lib/serial/backup/take-backup";
import { readsOfAll, wireLimitMs } from "@/lib/serial/driver/costs";
import { shippedDrivers } from "@/lib/serial/drivers/shipped";
import { hexOf } from "@/lib/serial/wire-log";
import { compiled, connect } from "@/tests/unit/serial/simulated-rig";
import type { Measurement } from "./measure";

/**
 * Backup of each shipped device in virtual time, from the first setting's request to the last setting's reply, against the least
 * time that its line allows for the values that it holds.
 */
export async function measureBackupVirtual(): Promise<readonly Measurement[]> {
  const measured: Measurement[] = [];
  for (const definition of shippedDrivers) {
    const driver = compiled(definition);
    const rig = await connect(driver);
    const before = rig.wireLog.entries().length;
    const backup = await rig.clock.run(takeBackup(rig.session, driver));
    if (!backup.ok) throw new Error(`${definition.model}: ${backup.error.message}`);
    const wanted = new Set(readsOfAll(driver).map((request) => hexOf(request.bytes)));
    const entries = rig.wireLog.entries().slice(before);
    const asked = entries.filter((entry) => entry.direction === "out" && wanted.has(hexOf(entry.bytes)));
    const numbers = new Set(asked.map((entry) => entry.number));
    const answered = entries.filter((entry) => entry.direction === "in" && entry.exchange !== undefined && numbers.has(entry.exchange));
    const [first] = asked;
    const last = answered.at(-1);
    if (!first || !last || asked.length !== wanted.size) throw new Error(`${definition.model}: not every setting was asked once`);
    await rig.clock.run(rig.session.close());
    measured.push({ name: `${definition.model} backup in virtual time`, value: last.atMs - first.atMs, unit: "ms", limit: 1.1 * wireLimitMs(driver, backup.value.content.values) });
  }
  return measured;
}
