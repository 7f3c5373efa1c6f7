import "server-only";
import pino from "pino";

/**
 * The server's log: one JSON object a line on standard output.
 *
 * Nothing that came in a body, a query or a cookie is ever handed to it; the redaction is the second lock.
 */
export const log = pino({
  name: "backporch",
  level: process.env.LOG_LEVEL ?? "info",
  base: undefined,
  timestamp: pino.stdTimeFunctions.isoTime,
  redact: {
    paths: [
      "password",
      "token",
      "secret",
      "cookie",
      "authorization",
      "*.password",
      "*.token",
      "*.secret",
      "*.cookie",
      "*.authorization",
    ],
    censor: "[removed]",
  },
});
