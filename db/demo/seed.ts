import { fileURLToPath } from "node:url";
import { sql } from "drizzle-orm";
import { openDb } from "@/db/client";
import type { Db } from "@/db/client";
import { demoAccounts } from "@/db/demo/accounts";
import { seedDevices, seedScreens } from "@/db/demo/seed-devices";
import { seedDrivers } from "@/db/demo/seed-drivers";
import { seedPeople } from "@/db/demo/seed-people";
import { seedProfiles } from "@/db/demo/seed-profiles";

/** Two loads at once would both find nothing there; any number of ours, so that the second waits. */
const loadLock = 0x5a17;

/**
 * Loads the demo: the Saltmarsh Play Archive, invented. What stands already is left as it is, what was deleted stays
 * deleted, and all comes in one transaction or not at all.
 */
export async function seedDemo(db: Db): Promise<void> {
  await db.transaction(async (tx) => {
    await tx.execute(sql`select pg_advisory_xact_lock(${loadLock})`);
    const people = await seedPeople(tx);
    await seedScreens(tx, people);
    await seedDevices(tx, people);
    await seedProfiles(tx, people);
    await seedDrivers(tx, people);
    if (people.size < demoAccounts.length) {
      console.log("Some of the demo's addresses belong to other people here; nothing was added for those.");
    }
  });
}

async function main(): Promise<void> {
  const url = process.env.DATABASE_URL;
  if (url === undefined || url === "") throw new Error("DATABASE_URL names the database to load the demo into");
  const { db, pool } = openDb(url, 1);
  try {
    await seedDemo(db);
  } finally {
    await pool.end();
  }
}

if (process.argv[1] === fileURLToPath(import.meta.url)) await main();
