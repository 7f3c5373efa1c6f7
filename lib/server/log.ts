import "server-only";
import pino from "pino";
import type { DestinationStream, Logger, LoggerOptions } from "pino";

const secretNames = ["password", "passwordHash", "token", "sessionToken", "secret", "cookie", "authorization"];

/**
 * A log: one JSON object a line, on standard output unless a stream is given.
 *
 * Nothing that came in a body, a query or a cookie is ever handed to it; the redaction is the second lock.
 */
export function createLog(stream?: DestinationStream): Logger {
  const options: LoggerOptions = {
    name: "backporch",
    level: process.env.LOG_LEVEL ?? "info",
    base: undefined,
    timestamp: pino.stdTimeFunctions.isoTime,
    redact: { paths: secretNames.flatMap((name) => [name, `*.${name}`]), censor: "[removed]" },
  };
  return stream === undefined ? pino(options) : pino(options, stream);
}

/** The server's log. */
export const log = createLog();
