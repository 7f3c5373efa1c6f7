import path from "node:path";
import { pathToFileURL } from "node:url";
import { drizzle } from "drizzle-orm/node-postgres";
import { migrate } from "drizzle-orm/node-postgres/migrator";
import pg from "pg";
import { seedShippedDrivers } from "@/db/seed-drivers";

/** Any number, the same for every process that migrates. */
const migrationLock = 7_350_317;

/**
 * Applies the migrations in `drizzle/` that a database lacks, and publishes the drivers that come with the program.
 * Several at once wait for each other.
 */
export async function migrateDatabase(connectionString: string): Promise<void> {
  const client = new pg.Client({ connectionString });
  await client.connect();
  try {
    await client.query("select pg_advisory_lock($1)", [migrationLock]);
    const db = drizzle(client);
    await migrate(db, { migrationsFolder: path.join(import.meta.dirname, "..", "drizzle") });
    await seedShippedDrivers(db);
  } finally {
    // Ending the connection gives the lock back.
    await client.end();
  }
}

if (process.argv[1] !== undefined && import.meta.url === pathToFileURL(process.argv[1]).href) {
  const connectionString = process.env.DATABASE_URL;
  if (connectionString === undefined) throw new Error("DATABASE_URL is not set.");
  await migrateDatabase(connectionString);
}
