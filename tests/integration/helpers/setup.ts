import { afterAll, inject } from "vitest";
import { runStatement, withDatabaseName } from "@/tests/integration/helpers/databases";

// Each test file has a database of its own, copied from the migrated one, so files run side by side and a route's
// own connections see what its test wrote. Set before any module opens a connection.
const serverUrl = inject("serverUrl");
const name = `test_${process.pid}_${crypto.randomUUID().replaceAll("-", "")}`;
await runStatement(serverUrl, `create database ${name} template ${inject("templateName")}`);
process.env.DATABASE_URL = withDatabaseName(serverUrl, name);
process.env.LOG_LEVEL = "silent";
process.env.AUTH_SECRET = "a secret that only tests know";

afterAll(async () => {
  const { pool } = await import("@/db/client");
  await pool.end();
  await runStatement(serverUrl, `drop database ${name} with (force)`);
});
