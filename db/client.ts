import { drizzle } from "drizzle-orm/node-postgres";
import type { NodePgQueryResultHKT } from "drizzle-orm/node-postgres";
import type { PgDatabase } from "drizzle-orm/pg-core";
import pg from "pg";

/** The database or a transaction in it: every query takes one of them first. */
export type Db = PgDatabase<NodePgQueryResultHKT, Record<string, never>>;

/** Connections of one server process. PostgreSQL allows 100 in all by default. */
const maxConnections = 10;

/** Opens a pool and the query builder over it. The caller ends the pool. */
export function openDb(connectionString: string, max = maxConnections): { db: Db; pool: pg.Pool } {
  const pool = new pg.Pool({ connectionString, max, connectionTimeoutMillis: 5000, application_name: "backporch" });
  // An idle connection that breaks must not end the process; the next query gets a new one, or its own error.
  pool.on("error", () => undefined);
  return { db: drizzle(pool), pool };
}

// The build loads this file without a database, so a missing address only shows at the first query.
export const { db, pool } = openDb(process.env.DATABASE_URL ?? "postgres://database-url-is-not-set.invalid/backporch");
