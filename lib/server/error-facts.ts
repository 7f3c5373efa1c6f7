/** What the log may hold of a failure. */
export type ErrorFacts = {
  readonly name: string;
  readonly message?: string;
  /** SQLSTATE or a system's code (`23505`, `ECONNREFUSED`). */
  readonly code?: string;
  readonly constraint?: string;
  readonly frames: readonly string[];
  readonly cause?: ErrorFacts;
};

const maxFrames = 12;
const maxCauses = 3;

/**
 * A failure without the values that were at work: a query's message and detail quote its parameters, among them
 * hashes and tokens, so only the name, the code, the constraint and the call stack are kept of those.
 */
export function errorFacts(error: unknown, causesLeft = maxCauses): ErrorFacts {
  if (!(error instanceof Error)) return { name: typeof error, frames: [] };
  const code = stringOf(error, "code");
  const constraint = stringOf(error, "constraint");
  const ofQuery = "query" in error || "severity" in error;
  return {
    name: error.name,
    ...(ofQuery ? {} : { message: error.message }),
    ...(code === undefined ? {} : { code }),
    ...(constraint === undefined ? {} : { constraint }),
    frames: framesOf(error),
    ...(error.cause === undefined || causesLeft === 0 ? {} : { cause: errorFacts(error.cause, causesLeft - 1) }),
  };
}

/** The stack without its first lines, which repeat the message. */
function framesOf(error: Error): string[] {
  const lines = (error.stack ?? "").split("\n").map((line) => line.trim());
  return lines.filter((line) => line.startsWith("at ")).slice(0, maxFrames);
}

function stringOf(error: Error, name: string): string | undefined {
  const value: unknown = Reflect.get(error, name);
  return typeof value === "string" ? value : undefined;
}
