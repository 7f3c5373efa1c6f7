/** @type {import("next").NextConfig} */
const config = {
  // BUILD_DIR lets the browser suite build beside a running server.
  distDir: process.env.BUILD_DIR ?? ".next",
  poweredByHeader: false,
  reactStrictMode: true,
  // The project's own folder: without it Next looks for lock files further up.
  turbopack: { root: import.meta.dirname },
  outputFileTracingRoot: import.meta.dirname,
  // Packages with native parts or worker threads stay outside the bundle.
  serverExternalPackages: ["@node-rs/argon2", "pg", "pino"],
};

export default config;
