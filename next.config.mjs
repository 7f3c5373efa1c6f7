/** Features that no page here uses; only `serial` is open, and only to ourselves. */
const denied = [
  "accelerometer",
  "autoplay",
  "camera",
  "display-capture",
  "encrypted-media",
  "geolocation",
  "gyroscope",
  "hid",
  "idle-detection",
  "local-fonts",
  "magnetometer",
  "microphone",
  "midi",
  "payment",
  "picture-in-picture",
  "publickey-credentials-get",
  "usb",
  "xr-spatial-tracking",
];

/** On every answer, files too. The content security policy has a nonce and is made in `proxy.ts`. */
const securityHeaders = [
  { key: "Permissions-Policy", value: ["serial=(self)", ...denied.map((feature) => `${feature}=()`)].join(", ") },
  { key: "X-Frame-Options", value: "DENY" },
  { key: "X-Content-Type-Options", value: "nosniff" },
  { key: "Referrer-Policy", value: "strict-origin-when-cross-origin" },
  { key: "Cross-Origin-Opener-Policy", value: "same-origin" },
  { key: "Cross-Origin-Resource-Policy", value: "same-origin" },
];

/** @type {import("next").NextConfig} */
const config = {
  // A build for tests may stand beside the one that is being served.
  distDir: process.env.BUILD_DIR ?? ".next",
  poweredByHeader: false,
  reactStrictMode: true,
  // The project's own folder: without it Next looks for lock files further up.
  turbopack: { root: import.meta.dirname },
  outputFileTracingRoot: import.meta.dirname,
  // Packages with native parts or worker threads stay outside the bundle.
  serverExternalPackages: ["@node-rs/argon2", "pg", "pino"],
  // `npm run typecheck` reads the whole project, tests too; the build need not do it again. The file of its own keeps
  // the types that Next writes for each build out of the others.
  typescript: { ignoreBuildErrors: true, tsconfigPath: "tsconfig.next.json" },
  headers: async () => [{ source: "/:path*", headers: securityHeaders }],
};

export default config;
