import nextVitals from "eslint-config-next/core-web-vitals";
import nextTypescript from "eslint-config-next/typescript";
import { createNodeResolver, importX } from "eslint-plugin-import-x";
import path from "node:path";

const root = import.meta.dirname;

/** Folders that never see React, the server, the network or the clock except through an argument. */
const pure = ["timing", "picture", "profile", "serial"];

/** `target` may not import from `from`. Paths are resolved, so no spelling of an import gets past. */
const forbid = (target, from, message) => ({
  target: path.join(root, target),
  from: path.join(root, from),
  message,
});

const directions = [
  ...["components", "lib", "db"].map((folder) => forbid(folder, "app", "Only routes import from app.")),
  ...["lib", "db"].map((folder) => forbid(folder, "components", "Components stand above lib and db.")),
  ...["lib", "db", "app", "components"].map((folder) =>
    forbid(folder, "tests", "The product never imports its tests."),
  ),
  ...["db", "lib/server"].map((from) => forbid("components", from, "Components reach the server through a route.")),
  ...[...pure, "contracts"].flatMap((folder) =>
    ["db", "lib/server"].map((from) => forbid(`lib/${folder}`, from, "This folder runs in a browser too.")),
  ),
  ...pure.map((folder) => forbid(`lib/${folder}`, "lib/contracts", "Contracts are made from the pure folders.")),
  ...["picture", "profile", "serial"].map((from) =>
    forbid("lib/timing", `lib/${from}`, "lib/timing stands below the others."),
  ),
  ...["profile", "serial"].map((from) => forbid("lib/picture", `lib/${from}`, "lib/picture uses lib/timing at most.")),
  forbid("lib/profile", "lib/serial", "Checks know a device only as DeviceLimits."),
];

const reachOut = [
  "react",
  "react-dom",
  "react/*",
  "react-dom/*",
  "next",
  "next/*",
  "next-auth",
  "next-auth/*",
  "@tanstack/*",
  "drizzle-orm",
  "drizzle-orm/*",
  "pg",
  "pino",
  "nodemailer",
  "server-only",
  "serialport",
  "node:net",
  "node:fs",
  "node:fs/*",
  "node:http",
  "node:https",
  "node:child_process",
  "node:timers",
  "node:timers/*",
];

/** Ambient clocks, chance and I/O. A pure folder takes them as arguments. */
const ambient = [
  "setTimeout",
  "setInterval",
  "setImmediate",
  "requestAnimationFrame",
  "fetch",
  "XMLHttpRequest",
  "WebSocket",
  "window",
  "document",
  "navigator",
  "localStorage",
  "sessionStorage",
  "indexedDB",
  "performance",
  "process",
].map((name) => ({ name, message: "Take it as an argument: this folder is pure." }));

const ambientProperties = [
  { object: "Date", property: "now", message: "Take a clock as an argument." },
  { object: "Math", property: "random", message: "Take a source of chance as an argument." },
  { object: "crypto", property: "randomUUID", message: "Take a source of ids as an argument." },
];

const noExportAll = {
  selector: "ExportAllDeclaration",
  message: "Name what is exported: no `export *`.",
};
const noBareDate = {
  selector: "NewExpression[callee.name='Date'][arguments.length=0]",
  message: "Take a clock as an argument.",
};

/** Where Next or a tool wants a default export. */
const defaultExports = [
  "app/**/{page,layout,template,error,global-error,loading,not-found,default,icon,apple-icon,opengraph-image,manifest,robots,sitemap}.{ts,tsx}",
  "*.config.{ts,mjs}",
  "tests/integration/helpers/global-setup.ts",
];

// Cycles of imports, and promises that nobody waits for, are found by oxlint (`.oxlintrc.json`), many times as fast.
const config = [
  {
    ignores: [
      ".next*/**",
      ".data/**",
      "next-env.d.ts",
      "playwright-report/**",
      "test-results/**",
      "drizzle/**",
      "public/**",
      // Copied from elsewhere as they are.
      "tests/fixtures/**",
    ],
  },
  // React's rules cost time on each file, so only where React is.
  ...nextVitals.map((part) =>
    part.files === undefined ? part : { ...part, files: ["{app,components}/**/*.{ts,tsx}"] },
  ),
  ...nextTypescript,
  {
    files: ["**/*.{ts,tsx,mjs}"],
    plugins: { "import-x": importX },
    settings: {
      "import-x/extensions": [".ts", ".tsx", ".mjs"],
      "import-x/parsers": { "@typescript-eslint/parser": [".ts", ".tsx"] },
      "import-x/resolver-next": [
        createNodeResolver({
          extensions: [".ts", ".tsx", ".mjs", ".js", ".json"],
          conditionNames: ["types", "import", "node", "default"],
          tsconfig: { configFile: path.join(root, "tsconfig.json"), references: "auto" },
        }),
      ],
      next: { rootDir: root },
      react: { version: "19.3" },
    },
    rules: {
      "import-x/no-self-import": "error",
      "import-x/no-default-export": "error",
      "import-x/no-restricted-paths": ["error", { basePath: root, zones: directions }],
      "no-restricted-imports": ["error", { patterns: [{ group: ["../*"], message: "Use the alias @/…" }] }],
      "no-restricted-syntax": ["error", noExportAll],
      "max-lines": ["error", { max: 400 }],
      "max-lines-per-function": ["error", { max: 200 }],
      "no-empty": ["error", { allowEmptyCatch: false }],
      "no-warning-comments": ["error", { terms: ["todo", "fixme", "xxx"] }],
      eqeqeq: ["error", "always"],
      "no-console": "error",
      "@typescript-eslint/no-explicit-any": "error",
      "@typescript-eslint/ban-ts-comment": ["error", { "ts-expect-error": true, "ts-ignore": true }],
      "@typescript-eslint/no-unused-vars": ["error", { argsIgnorePattern: "^_", varsIgnorePattern: "^_" }],
      "@typescript-eslint/consistent-type-imports": [
        "error",
        { fixStyle: "separate-type-imports", disallowTypeAnnotations: false },
      ],
    },
  },
  { files: defaultExports, rules: { "import-x/no-default-export": "off" } },
  {
    files: [`lib/{${pure.join(",")}}/**/*.ts`],
    // The one file that binds the machine's own clock to the Clock argument.
    ignores: ["**/real-clock.ts"],
    rules: {
      "no-restricted-imports": [
        "error",
        {
          patterns: [
            { group: ["../*"], message: "Use the alias @/…" },
            { group: reachOut, message: "This folder is pure: no React, Next, database, server or network." },
          ],
        },
      ],
      "no-restricted-globals": ["error", ...ambient],
      "no-restricted-properties": ["error", ...ambientProperties],
      "no-restricted-syntax": ["error", noExportAll, noBareDate],
    },
  },
  {
    // Tables of data may be long.
    files: ["lib/serial/drivers/**", "lib/timing/**/*-data.ts", "db/demo/**"],
    rules: { "max-lines": "off" },
  },
  {
    files: ["scripts/**", "tests/**", "db/demo/seed.ts", "db/migrate.ts"],
    rules: { "no-console": "off" },
  },
  {
    files: ["tests/**"],
    rules: { "max-lines-per-function": "off", "react-hooks/rules-of-hooks": "off" },
  },
];

export default config;
