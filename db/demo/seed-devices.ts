import { inArray } from "drizzle-orm";
import type { Db } from "@/db/client";
import { demoId } from "@/db/demo/demo-id";
import { demoDevices } from "@/db/demo/devices";
import type { DemoDevice } from "@/db/demo/devices";
import { demoScreens } from "@/db/demo/screens";
import type { People } from "@/db/demo/seed-people";
import { simulateBackup } from "@/db/demo/simulate-backup";
import { pinBackup } from "@/db/queries/backup-acts";
import { createBackup } from "@/db/queries/backups";
import { createDevice } from "@/db/queries/devices";
import { createScreen } from "@/db/queries/screens";
import { device } from "@/db/schema/device";
import { screen } from "@/db/schema/screen";
import { shippedDriver } from "@/lib/serial/drivers/shipped";
import type { NativeValues } from "@/lib/serial/native";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";

const screenId = (key: string) => demoId(`screen ${key}`);
const deviceId = (key: string) => demoId(`device ${key}`);
const backupId = (key: string) => demoId(`backup ${key}`);

/** Adds the demo's screens that were never there; one that its owner deleted does not come back. */
export async function seedScreens(db: Db, people: People): Promise<void> {
  const ids = demoScreens.map(({ key }) => screenId(key));
  const standing = await db.select({ id: screen.id }).from(screen).where(inArray(screen.id, ids));
  for (const { key, owner, ...values } of demoScreens) {
    const person = people.get(owner);
    if (person === undefined || standing.some(({ id }) => id === screenId(key))) continue;
    await createScreen(db, person.id, { ...values, id: screenId(key) });
  }
}

/** Adds the demo's devices that were never there, each with backups read from a simulated device. */
export async function seedDevices(db: Db, people: People): Promise<void> {
  const ids = demoDevices.map(({ key }) => deviceId(key));
  const standing = await db.select({ id: device.id }).from(device).where(inArray(device.id, ids));
  for (const one of demoDevices) {
    const person = people.get(one.owner);
    if (person === undefined || standing.some(({ id }) => id === deviceId(one.key))) continue;
    await seedDevice(db, person.id, one);
  }
}

async function seedDevice(db: Db, ownerId: string, one: DemoDevice): Promise<void> {
  const definition = shippedDriver(one.driverSlug);
  const { maker, model, slug, version } = definition;
  const { name, serialNumber, firmware } = one;
  const made = await createDevice(db, ownerId, {
    id: deviceId(one.key),
    name,
    driver: { slug, version },
    maker,
    model,
    serialNumber,
    firmware,
    simulated: true,
    screenId: screenId(one.screen),
  });
  if (!made.ok) throw new Error(`demo device ${one.key}: ${made.error}`);
  let values: NativeValues = {};
  for (const { key, name: label, cause, at, changes, activeSlot, source } of one.backups) {
    values = { ...values, ...changes };
    const state = { values, serialNumber, firmware, activeSlot, source };
    const { content, arriving, rasterOut } = await simulateBackup(compiledDriver(definition), state);
    const stored = await createBackup(db, ownerId, {
      id: backupId(key),
      deviceId: made.value.id,
      name: label,
      cause,
      takenAt: new Date(at),
      content,
      firmware,
      activeSlot,
      arriving,
      rasterOut,
    });
    if (!stored.ok) throw new Error(`demo backup ${key}: ${stored.error}`);
  }
  if (one.knownGood !== undefined) await pinBackup(db, { ownerId, id: backupId(one.knownGood) }, true);
}
