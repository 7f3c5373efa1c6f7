import type { TestProject } from "vitest/node";
import { migrateDatabase } from "@/db/migrate";
import { openDatabase } from "@/scripts/database.mjs";
import { runStatement, withDatabaseName } from "@/tests/integration/helpers/databases";

declare module "vitest" {
  interface ProvidedContext {
    serverUrl: string;
    templateName: string;
  }
}

/** Starts a real PostgreSQL (or takes the given one) and migrates one database that each test file copies. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const database = await openDatabase({ kind: "test" });
  const templateName = `template_${process.pid}`;
  await runStatement(database.url, `create database ${templateName}`);
  await migrateDatabase(withDatabaseName(database.url, templateName));
  project.provide("serverUrl", database.url);
  project.provide("templateName", templateName);
  return async () => {
    await runStatement(database.url, `drop database ${templateName} with (force)`);
    await database.stop();
  };
}
