import { createHash } from "node:crypto";

/**
 * The id of a demo row, always the same for the same name, so that loading the demo again finds what stands.
 * A name-based UUID (RFC 9562, version 8: our own use of SHA-256).
 */
export function demoId(name: string): string {
  const hex = createHash("sha256").update(`Saltmarsh Play Archive: ${name}`).digest("hex");
  const parts = [
    hex.slice(0, 8),
    hex.slice(8, 12),
    `8${hex.slice(13, 16)}`,
    `8${hex.slice(17, 20)}`,
    hex.slice(20, 32),
  ];
  return parts.join("-");
}
