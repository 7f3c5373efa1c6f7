import path from "node:path";
import { defineConfig } from "vitest/config";

const root = import.meta.dirname;

/** One project: its tests may only use what its name promises (no database in `unit`, and so on). */
function project(name: string, folder: string, test: object = {}) {
  return {
    extends: true as const,
    test: { name, include: [`tests/${folder}/**/*.test.{ts,tsx}`], environment: "node", ...test },
  };
}

export default defineConfig({
  resolve: {
    alias: {
      "@": root,
      // Outside a bundler "server-only" throws on import; the guard itself is the build's affair.
      "server-only": path.join(root, "node_modules/server-only/empty.js"),
    },
  },
  test: {
    root,
    maxWorkers: 2,
    allowOnly: false,
    restoreMocks: true,
    projects: [
      // Generous: a limit here is for a test that hangs, not for a machine that is busy.
      project("unit", "unit", { testTimeout: 30_000 }),
      project("integration", "integration", {
        globalSetup: "tests/integration/helpers/global-setup.ts",
        setupFiles: "tests/integration/helpers/setup.ts",
        // It imports `next/server` without an ending, which only a bundler resolves.
        server: { deps: { inline: ["next-auth"] } },
        testTimeout: 20_000,
        hookTimeout: 60_000,
      }),
      project("peers", "peers", { testTimeout: 60_000, hookTimeout: 60_000 }),
      project("faults", "faults", { testTimeout: 120_000 }),
    ],
  },
});
