import { createServer } from "node:net";
import { defineConfig } from "@playwright/test";

/** A free port, found once: worker processes read this file again and must see the same one. */
async function freePort(): Promise<string> {
  return new Promise((resolve) => {
    const server = createServer();
    server.listen(0, "127.0.0.1", () => {
      const address = server.address();
      server.close(() => resolve(String(typeof address === "object" && address !== null ? address.port : 0)));
    });
  });
}

process.env.E2E_PORT ??= await freePort();
const baseURL = `http://127.0.0.1:${process.env.E2E_PORT}`;

export default defineConfig({
  testDir: "tests/e2e",
  outputDir: "test-results",
  forbidOnly: true,
  fullyParallel: true,
  workers: 2,
  retries: 0,
  timeout: 150_000,
  expect: { timeout: 10_000 },
  reporter: process.env.E2E_REPORT ? [["json", { outputFile: process.env.E2E_REPORT }], ["line"]] : [["list"]],
  use: {
    baseURL,
    // A trace holds the page up so long that a device over a slow wire runs into its deadlines.
    screenshot: "only-on-failure",
    viewport: { width: 1440, height: 900 },
    locale: "en-GB",
    timezoneId: "Europe/London",
    // A lamp that breathes is drawn sixty times a second, and no graphics processor helps here.
    contextOptions: { reducedMotion: "reduce" },
    launchOptions: { executablePath: process.env.CHROMIUM_PATH ?? "/usr/bin/chromium-headless-shell" },
  },
  projects: [
    { name: "pages", testMatch: /(?:headers|pages-[\w-]+)\.spec\.ts$/u },
    // Tests with a device mostly wait for its wire, those of pages keep a core busy: those come first.
    { name: "wire", testMatch: /(?:bench-[\w-]+|journey-[\w-]+|tour)\.spec\.ts$/u },
  ],
  webServer: {
    command: `"${process.execPath}" scripts/serve-test.mjs`,
    url: `${baseURL}/api/health`,
    env: { PORT: process.env.E2E_PORT },
    timeout: 300_000,
    reuseExistingServer: false,
    // Time to stop the server and its database by itself; what is left after that ends by its own guards.
    gracefulShutdown: { signal: "SIGTERM", timeout: 30_000 },
    stdout: "ignore",
    stderr: "pipe",
  },
});
