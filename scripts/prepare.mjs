import { randomBytes } from "node:crypto";
import { existsSync, mkdirSync, readFileSync, writeFileSync } from "node:fs";
import path from "node:path";
import { dataFolder } from "./database.mjs";
import { run } from "./processes.mjs";

const root = path.dirname(import.meta.dirname);

/** Runs a TypeScript file of the project to its end. Throws with its output when it fails; returns the output. */
export async function runTypeScript(file, env = {}) {
  // The condition makes "server-only" importable outside a bundler.
  const args = ["--conditions=react-server", "--import", "tsx", path.join(root, file)];
  const { code, output } = await run(process.execPath, args, { cwd: root, env: { ...process.env, ...env } });
  if (code !== 0) throw new Error(`${file} failed:\n${output}`);
  return output;
}

/** Brings the database of `url` to the current migrations and loads the demo where its data is not yet. */
export async function prepareDatabase(url) {
  await runTypeScript("db/migrate.ts", { DATABASE_URL: url });
  await runTypeScript("db/demo/seed.ts", { DATABASE_URL: url });
}

/** The secret that signs sessions: the given one, or one made once and kept beside the data. */
export function authSecret() {
  const given = process.env.AUTH_SECRET;
  if (given !== undefined && given !== "") return given;
  const file = path.join(dataFolder, "auth-secret");
  mkdirSync(dataFolder, { recursive: true });
  if (!existsSync(file)) writeFileSync(file, randomBytes(32).toString("base64url"), { mode: 0o600 });
  return readFileSync(file, "utf8");
}

/** What a server process needs to know, on top of this one's environment. */
export function serverEnvironment({ url, port, buildFolder }) {
  return {
    ...process.env,
    NODE_ENV: "production",
    NEXT_TELEMETRY_DISABLED: "1",
    DATABASE_URL: url,
    AUTH_SECRET: authSecret(),
    AUTH_TRUST_HOST: "true",
    PORT: String(port),
    BUILD_DIR: buildFolder,
  };
}
