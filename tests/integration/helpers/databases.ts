import pg from "pg";

/** The same server and credentials, another database. */
export function withDatabaseName(url: string, name: string): string {
  const other = new URL(url);
  other.pathname = `/${name}`;
  return other.href;
}

/** Runs one statement in the database of `url`. Names in it must be made by us: they cannot be parameters. */
export async function runStatement(url: string, statement: string): Promise<void> {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  try {
    await client.query(statement);
  } finally {
    await client.end();
  }
}
